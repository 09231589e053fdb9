interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** What one value of a setup says beside what it always said: what its ± is, its degrees of freedom, its certificate. */
const more = (name: string) => `
    ADD COLUMN IF NOT EXISTS ${name}_shape VARCHAR(12) NOT NULL DEFAULT 'expanded',
    ADD COLUMN IF NOT EXISTS ${name}_dof DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS ${name}_file CHAR(64) CHARACTER SET ascii NULL`;

/**
 * Setups are entered by one person and approved by another. Setups that are here already were entered before approval
 * was asked for: they keep `needs_approval` FALSE and stay in force from the moment they were entered. What is decided
 * is a row of its own, added once for each setup and never changed. Certificates lie in the object store under their
 * SHA-256.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS certificate_files (
    sha256 CHAR(64) CHARACTER SET ascii NOT NULL PRIMARY KEY,
    file_name VARCHAR(255) NOT NULL,
    media_type VARCHAR(40) NOT NULL,
    bytes INT UNSIGNED NOT NULL,
    added_by INT UNSIGNED NOT NULL,
    added_at DATETIME(3) NOT NULL,
    CONSTRAINT certificate_files_person FOREIGN KEY (added_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`ALTER TABLE setups
    ADD COLUMN IF NOT EXISTS needs_approval BOOLEAN NOT NULL DEFAULT FALSE,
    ADD COLUMN IF NOT EXISTS wanted_from DATETIME(3) NULL,
    ADD COLUMN IF NOT EXISTS camera_model VARCHAR(80) NOT NULL DEFAULT '',
    ADD COLUMN IF NOT EXISTS camera_serial VARCHAR(80) NOT NULL DEFAULT '',
    ADD COLUMN IF NOT EXISTS camera_bits TINYINT UNSIGNED NULL,
    ADD COLUMN IF NOT EXISTS confirmed_json TEXT NOT NULL DEFAULT '[]',
    ${['scale', 'separation', 'width', 'distance'].map(more).join(',')}`);
  await run(`CREATE TABLE IF NOT EXISTS setup_decisions (
    setup_id INT UNSIGNED NOT NULL PRIMARY KEY,
    decision VARCHAR(12) NOT NULL,
    in_force_from DATETIME(3) NULL,
    reason VARCHAR(1000) NOT NULL DEFAULT '',
    decided_by INT UNSIGNED NOT NULL,
    decided_at DATETIME(3) NOT NULL,
    CONSTRAINT setup_decisions_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT setup_decisions_person FOREIGN KEY (decided_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const table of ['setup_decisions', 'certificate_files']) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
