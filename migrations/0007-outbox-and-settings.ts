interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** Mails that committed with a change and are sent after it; and the few facts the product keeps about itself. */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS outbox (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    to_address VARCHAR(254) NOT NULL,
    subject VARCHAR(300) NOT NULL,
    body_text MEDIUMTEXT NOT NULL,
    created_at DATETIME(3) NOT NULL,
    next_try_at DATETIME(3) NOT NULL,
    tries INT UNSIGNED NOT NULL DEFAULT 0,
    claimed_at DATETIME(3) NULL,
    sent_at DATETIME(3) NULL,
    last_error VARCHAR(500) NULL,
    KEY outbox_due (sent_at, next_try_at)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS settings (
    name VARCHAR(60) NOT NULL PRIMARY KEY,
    value_json TEXT NOT NULL,
    changed_at DATETIME(3) NOT NULL
  ) ENGINE=InnoDB`);
}
