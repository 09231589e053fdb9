interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Notices at once or once a day, one open mail for one cause, and passes that end: an auditor's access has a last
 * moment.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run('ALTER TABLE people ADD COLUMN IF NOT EXISTS mail_daily BOOLEAN NOT NULL DEFAULT FALSE');
  await run('ALTER TABLE people ADD COLUMN IF NOT EXISTS access_until DATETIME(3) NULL');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS digest BOOLEAN NOT NULL DEFAULT FALSE');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS cause VARCHAR(120) NULL');
  await run('ALTER TABLE outbox ADD COLUMN IF NOT EXISTS claimed_by CHAR(36) CHARACTER SET ascii NULL');
  await run('CREATE INDEX IF NOT EXISTS outbox_cause ON outbox (cause, to_address, sent_at)');
}
