interface Step {
  context: (sql: string) => Promise<unknown>;
}

const IMMUTABLE = ['region_trials', 'move_reasons'];

/**
 * Regions a person tried, with the value their page showed, and why a value was moved. Signatures say when the
 * password was typed; the last time it was typed is kept per person and session.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS region_trials (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    frame_id INT UNSIGNED NOT NULL,
    from_reading_id INT UNSIGNED NULL,
    kept_reading_id INT UNSIGNED NULL,
    change_json TEXT NOT NULL,
    value_nm DOUBLE NULL,
    expanded_nm DOUBLE NULL,
    problem VARCHAR(300) NULL,
    tried_by INT UNSIGNED NOT NULL,
    tried_at DATETIME(3) NOT NULL,
    KEY region_trials_frame (frame_id, id),
    CONSTRAINT region_trials_frame FOREIGN KEY (frame_id) REFERENCES frames (id),
    CONSTRAINT region_trials_from FOREIGN KEY (from_reading_id) REFERENCES readings (id),
    CONSTRAINT region_trials_kept FOREIGN KEY (kept_reading_id) REFERENCES readings (id),
    CONSTRAINT region_trials_person FOREIGN KEY (tried_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS move_reasons (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    words VARCHAR(1000) NOT NULL,
    given_by INT UNSIGNED NOT NULL,
    given_at DATETIME(3) NOT NULL,
    UNIQUE KEY move_reasons_reading (reading_id),
    CONSTRAINT move_reasons_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT move_reasons_person FOREIGN KEY (given_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run('ALTER TABLE signatures ADD COLUMN IF NOT EXISTS password_at DATETIME(3) NULL');
  await run(`CREATE TABLE IF NOT EXISTS password_proofs (
    person_id INT UNSIGNED NOT NULL,
    session_id CHAR(36) CHARACTER SET ascii NOT NULL,
    at DATETIME(3) NOT NULL,
    PRIMARY KEY (person_id, session_id),
    KEY password_proofs_at (at),
    CONSTRAINT password_proofs_person FOREIGN KEY (person_id) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const table of IMMUTABLE) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
