interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Setups that correct the past: in force from a moment that has gone by. What each reading of that time would be with
 * their values is measured before QA decides, kept here once, and is exactly what an approval makes into new readings.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`ALTER TABLE setups ADD COLUMN IF NOT EXISTS corrects BOOLEAN NOT NULL DEFAULT FALSE`);
  await run(`CREATE TABLE IF NOT EXISTS correction_fits (
    setup_id INT UNSIGNED NOT NULL,
    reading_id INT UNSIGNED NOT NULL,
    message VARCHAR(1000) NULL,
    value_nm DOUBLE NULL,
    expanded_nm DOUBLE NULL,
    verdict VARCHAR(12) NULL,
    options_json TEXT NULL,
    result_json LONGTEXT NULL,
    made_at DATETIME(3) NOT NULL,
    PRIMARY KEY (setup_id, reading_id),
    CONSTRAINT correction_fits_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT correction_fits_reading FOREIGN KEY (reading_id) REFERENCES readings (id)
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER correction_fits_no_${verb.toLowerCase()} BEFORE ${verb} ON correction_fits FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of correction_fits are never changed or deleted'`,
    );
  }
}
