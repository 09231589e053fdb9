interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * The band stacks frames were measured from. Their bytes lie in the object store under their SHA-256; what is written
 * here is enough to make them again. Rows are added, never changed.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS band_stacks (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    frame_id INT UNSIGNED NOT NULL,
    engine VARCHAR(40) NOT NULL,
    tone VARCHAR(10) NOT NULL,
    plan_json TEXT NOT NULL,
    sha256 CHAR(64) CHARACTER SET ascii NOT NULL,
    bytes INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY band_stacks_sha (frame_id, sha256),
    KEY band_stacks_engine (frame_id, engine, tone, id),
    CONSTRAINT band_stacks_frame FOREIGN KEY (frame_id) REFERENCES frames (id)
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER band_stacks_no_${verb.toLowerCase()} BEFORE ${verb} ON band_stacks FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of band_stacks are never changed or deleted'`,
    );
  }
}
