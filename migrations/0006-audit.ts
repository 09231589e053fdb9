interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** The log of changes: each row carries the hash of the row before it. The head is the one row writers queue on. */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS audit_rows (
    id BIGINT UNSIGNED NOT NULL PRIMARY KEY,
    at DATETIME(3) NOT NULL,
    person_id INT UNSIGNED NULL,
    who VARCHAR(80) NOT NULL,
    action VARCHAR(40) NOT NULL,
    subject_kind VARCHAR(20) NOT NULL,
    subject_id INT UNSIGNED NULL,
    subject VARCHAR(300) NOT NULL,
    before_json MEDIUMTEXT NOT NULL,
    after_json MEDIUMTEXT NOT NULL,
    previous_hash CHAR(64) CHARACTER SET ascii NOT NULL,
    hash CHAR(64) CHARACTER SET ascii NOT NULL,
    KEY audit_rows_action (action, id),
    KEY audit_rows_subject (subject_kind, subject_id, id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS audit_head (
    id TINYINT UNSIGNED NOT NULL PRIMARY KEY,
    last_id BIGINT UNSIGNED NOT NULL,
    hash CHAR(64) CHARACTER SET ascii NOT NULL
  ) ENGINE=InnoDB`);
  await run(`INSERT IGNORE INTO audit_head (id, last_id, hash) VALUES (1, 0, REPEAT('0', 64))`);
}
