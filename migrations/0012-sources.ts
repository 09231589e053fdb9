interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * What kind of source it is, whether a bench may be checked with it, and what its wavelength stands on. A renewed
 * certificate is a new row; `sources` shows the newest. Sources that are here already have said no kind.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`ALTER TABLE sources
    ADD COLUMN IF NOT EXISTS kind VARCHAR(20) NOT NULL DEFAULT 'unstated',
    ADD COLUMN IF NOT EXISTS is_reference BOOLEAN NOT NULL DEFAULT TRUE,
    ADD COLUMN IF NOT EXISTS certificate VARCHAR(300) NOT NULL DEFAULT '',
    ADD COLUMN IF NOT EXISTS file CHAR(64) CHARACTER SET ascii NULL,
    ADD COLUMN IF NOT EXISTS due DATE NULL`);
  await run(`CREATE TABLE IF NOT EXISTS source_certificates (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    source_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    vacuum_nm DOUBLE NOT NULL,
    u_nm DOUBLE NOT NULL,
    certificate VARCHAR(300) NOT NULL DEFAULT '',
    file CHAR(64) CHARACTER SET ascii NULL,
    due DATE NULL,
    entered_by INT UNSIGNED NOT NULL,
    entered_at DATETIME(3) NOT NULL,
    UNIQUE KEY source_certificates_number (source_id, number),
    CONSTRAINT source_certificates_source FOREIGN KEY (source_id) REFERENCES sources (id),
    CONSTRAINT source_certificates_person FOREIGN KEY (entered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`INSERT INTO source_certificates (source_id, number, vacuum_nm, u_nm, certificate, file, due, entered_by, entered_at)
    SELECT s.id, 1, s.vacuum_nm, s.u_nm, s.certificate, s.file, s.due, s.created_by, s.created_at FROM sources s
    WHERE NOT EXISTS (SELECT 1 FROM source_certificates c WHERE c.source_id = s.id)`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER source_certificates_no_${verb.toLowerCase()} BEFORE ${verb} ON source_certificates FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of source_certificates are never changed or deleted'`,
    );
  }
}
