interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Frames: one row per picture received. `same_key` makes the same bytes for the same bench and subject one row;
 * it is emptied when the bytes were lost, so that the file can be sent again. `find_text` is what the list's
 * search looks through (file name, serial, lot, source).
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS frames (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    setup_id INT UNSIGNED NOT NULL,
    lot_id INT UNSIGNED NULL,
    unit_id INT UNSIGNED NULL,
    source_id INT UNSIGNED NULL,
    file_name VARCHAR(255) NOT NULL,
    find_text VARCHAR(500) NOT NULL,
    bytes BIGINT UNSIGNED NOT NULL,
    sha256 CHAR(64) CHARACTER SET ascii NOT NULL,
    media_type VARCHAR(20) NOT NULL,
    same_key VARCHAR(120) CHARACTER SET ascii NULL,
    state VARCHAR(12) NOT NULL,
    code VARCHAR(40) NULL,
    message VARCHAR(1000) NULL,
    width_px INT UNSIGNED NULL,
    height_px INT UNSIGNED NULL,
    spool_path VARCHAR(500) NULL,
    uploaded_by INT UNSIGNED NOT NULL,
    received_at DATETIME(3) NOT NULL,
    claimed_at DATETIME(3) NULL,
    fit_tries INT UNSIGNED NOT NULL DEFAULT 0,
    in_intake BOOLEAN NOT NULL DEFAULT TRUE,
    reading_id INT UNSIGNED NULL,
    UNIQUE KEY frames_same (same_key),
    KEY frames_state (state, id),
    KEY frames_bench (bench_id, id),
    KEY frames_lot (lot_id, id),
    KEY frames_unit (unit_id, id),
    KEY frames_source (source_id, id),
    KEY frames_intake (uploaded_by, in_intake, id),
    KEY frames_received (received_at),
    KEY frames_reading (reading_id),
    KEY frames_sha (sha256),
    CONSTRAINT frames_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT frames_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT frames_lot FOREIGN KEY (lot_id) REFERENCES lots (id),
    CONSTRAINT frames_unit FOREIGN KEY (unit_id) REFERENCES units (id),
    CONSTRAINT frames_source FOREIGN KEY (source_id) REFERENCES sources (id),
    CONSTRAINT frames_person FOREIGN KEY (uploaded_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
}
