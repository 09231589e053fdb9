interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Readings hold what was measured and are never updated; the whole result with its curves lies in a table of its
 * own so that lists stay light. `reading_states` holds the life cycle, changed only by conditional updates.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS readings (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    frame_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    replaces_id INT UNSIGNED NULL,
    bench_id INT UNSIGNED NOT NULL,
    setup_id INT UNSIGNED NOT NULL,
    lot_id INT UNSIGNED NULL,
    unit_id INT UNSIGNED NULL,
    source_id INT UNSIGNED NULL,
    made_by INT UNSIGNED NULL,
    made_at DATETIME(3) NOT NULL,
    made_in_review BOOLEAN NOT NULL,
    engine VARCHAR(40) NOT NULL,
    frame_sha256 CHAR(64) CHARACTER SET ascii NOT NULL,
    digest CHAR(64) CHARACTER SET ascii NOT NULL,
    options_json TEXT NOT NULL,
    setup_json TEXT NOT NULL,
    specification_json TEXT NULL,
    medium VARCHAR(10) NOT NULL,
    value_nm DOUBLE NULL,
    u_nm DOUBLE NULL,
    expanded_nm DOUBLE NULL,
    k DOUBLE NULL,
    dof DOUBLE NULL,
    wavelength_air_nm DOUBLE NULL,
    wavelength_vacuum_nm DOUBLE NULL,
    verdict VARCHAR(12) NULL,
    judgement_json TEXT NULL,
    word VARCHAR(8) NOT NULL,
    word_text VARCHAR(1000) NOT NULL,
    order_centres INT UNSIGNED NOT NULL,
    spacing_px DOUBLE NOT NULL,
    u_spacing_px DOUBLE NOT NULL,
    scale_um_per_px DOUBLE NOT NULL,
    zero_along_px DOUBLE NOT NULL,
    UNIQUE KEY readings_number (frame_id, number),
    KEY readings_source (bench_id, source_id, id),
    KEY readings_lot (bench_id, lot_id, id),
    KEY readings_unit (unit_id, id),
    KEY readings_setup (setup_id),
    KEY readings_replaces (replaces_id),
    CONSTRAINT readings_frame FOREIGN KEY (frame_id) REFERENCES frames (id),
    CONSTRAINT readings_replaced FOREIGN KEY (replaces_id) REFERENCES readings (id),
    CONSTRAINT readings_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT readings_person FOREIGN KEY (made_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS reading_results (
    reading_id INT UNSIGNED NOT NULL PRIMARY KEY,
    strip_json MEDIUMTEXT NOT NULL,
    result_json LONGTEXT NOT NULL,
    CONSTRAINT reading_results_reading FOREIGN KEY (reading_id) REFERENCES readings (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS reading_states (
    reading_id INT UNSIGNED NOT NULL PRIMARY KEY,
    frame_id INT UNSIGNED NOT NULL,
    bench_id INT UNSIGNED NOT NULL,
    status VARCHAR(12) NOT NULL,
    version INT UNSIGNED NOT NULL DEFAULT 0,
    changed_at DATETIME(3) NOT NULL,
    sent_by INT UNSIGNED NULL,
    sent_at DATETIME(3) NULL,
    note VARCHAR(1000) NOT NULL DEFAULT '',
    risk DOUBLE NOT NULL DEFAULT 0,
    accepted_at DATETIME(3) NULL,
    KEY reading_states_queue (status, risk, sent_at),
    KEY reading_states_bench (bench_id, status),
    KEY reading_states_frame (frame_id),
    CONSTRAINT reading_states_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT reading_states_sender FOREIGN KEY (sent_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS signatures (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    person_id INT UNSIGNED NOT NULL,
    person_name VARCHAR(80) NOT NULL,
    role VARCHAR(20) NOT NULL,
    meaning VARCHAR(300) NOT NULL,
    signed_at DATETIME(3) NOT NULL,
    digest CHAR(64) CHARACTER SET ascii NOT NULL,
    UNIQUE KEY signatures_reading (reading_id),
    CONSTRAINT signatures_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT signatures_person FOREIGN KEY (person_id) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS returns (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    reason VARCHAR(30) NOT NULL,
    words VARCHAR(1000) NOT NULL DEFAULT '',
    returned_by INT UNSIGNED NOT NULL,
    returned_at DATETIME(3) NOT NULL,
    UNIQUE KEY returns_reading (reading_id),
    CONSTRAINT returns_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT returns_person FOREIGN KEY (returned_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS look_answers (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    check_name VARCHAR(60) NOT NULL,
    answer VARCHAR(20) NOT NULL,
    reason VARCHAR(1000) NOT NULL,
    answered_by INT UNSIGNED NOT NULL,
    answered_at DATETIME(3) NOT NULL,
    UNIQUE KEY look_answers_check (reading_id, check_name),
    CONSTRAINT look_answers_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT look_answers_person FOREIGN KEY (answered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
}
