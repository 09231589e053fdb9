interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** Once a day the head of the log is written down and mailed, so that a log written anew from its start is found out. */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS audit_anchors (
    day DATE NOT NULL PRIMARY KEY,
    last_id BIGINT UNSIGNED NOT NULL,
    hash CHAR(64) CHARACTER SET ascii NOT NULL,
    made_at DATETIME(3) NOT NULL
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER audit_anchors_no_${verb.toLowerCase()} BEFORE ${verb} ON audit_anchors FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of audit_anchors are never changed or deleted'`,
    );
  }
}
