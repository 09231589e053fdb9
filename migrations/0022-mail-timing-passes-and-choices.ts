interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Notices at once or once a day, one open mail for one cause, and passes that end: an auditor's access has a last
 * moment. Of several frames of a unit, which reading is reported is chosen, each choice a row of its own.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run('ALTER TABLE people ADD COLUMN IF NOT EXISTS mail_daily BOOLEAN NOT NULL DEFAULT FALSE');
  await run('ALTER TABLE people ADD COLUMN IF NOT EXISTS access_until DATETIME(3) NULL');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS digest BOOLEAN NOT NULL DEFAULT FALSE');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS cause VARCHAR(120) NULL');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS claimed_by CHAR(36) CHARACTER SET ascii NULL');
  await run('CREATE INDEX IF NOT EXISTS outbox_cause ON outbox (cause, to_address, sent_at)');
  await run(`CREATE TABLE IF NOT EXISTS reportable_choices (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    unit_id INT UNSIGNED NOT NULL,
    reading_id INT UNSIGNED NOT NULL,
    reason VARCHAR(1000) NOT NULL,
    chosen_by INT UNSIGNED NOT NULL,
    chosen_at DATETIME(3) NOT NULL,
    KEY reportable_choices_unit (unit_id, id),
    CONSTRAINT reportable_choices_unit FOREIGN KEY (unit_id) REFERENCES units (id),
    CONSTRAINT reportable_choices_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT reportable_choices_person FOREIGN KEY (chosen_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER reportable_choices_no_${verb.toLowerCase()} BEFORE ${verb} ON reportable_choices
       FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of reportable_choices are never changed or deleted'`,
    );
  }
}
