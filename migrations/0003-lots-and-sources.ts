interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** What is inspected: specifications (never edited, only retired), lots, units, their outcomes; and sources. */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS specifications (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    name VARCHAR(80) NOT NULL,
    nominal_nm DOUBLE NOT NULL,
    medium VARCHAR(10) NOT NULL,
    lower_nm DOUBLE NULL,
    upper_nm DOUBLE NULL,
    decision_rule VARCHAR(20) NOT NULL,
    own_guard_nm DOUBLE NULL,
    ratio DOUBLE NOT NULL,
    half_tolerance_nm DOUBLE NOT NULL,
    created_by INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    retired_at DATETIME(3) NULL,
    UNIQUE KEY specifications_name (name),
    CONSTRAINT specifications_person FOREIGN KEY (created_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS lots (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    number VARCHAR(40) NOT NULL,
    specification_id INT UNSIGNED NOT NULL,
    supplier VARCHAR(120) NOT NULL DEFAULT '',
    opened_by INT UNSIGNED NOT NULL,
    opened_at DATETIME(3) NOT NULL,
    closed_at DATETIME(3) NULL,
    UNIQUE KEY lots_number (number),
    KEY lots_opened (opened_at),
    CONSTRAINT lots_specification FOREIGN KEY (specification_id) REFERENCES specifications (id),
    CONSTRAINT lots_person FOREIGN KEY (opened_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS units (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    lot_id INT UNSIGNED NOT NULL,
    serial VARCHAR(60) NOT NULL,
    added_at DATETIME(3) NOT NULL,
    UNIQUE KEY units_serial (lot_id, serial),
    CONSTRAINT units_lot FOREIGN KEY (lot_id) REFERENCES lots (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS unit_outcomes (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    unit_id INT UNSIGNED NOT NULL,
    outcome VARCHAR(20) NOT NULL,
    reason VARCHAR(1000) NOT NULL DEFAULT '',
    set_by INT UNSIGNED NOT NULL,
    set_at DATETIME(3) NOT NULL,
    KEY unit_outcomes_unit (unit_id, id),
    CONSTRAINT unit_outcomes_unit FOREIGN KEY (unit_id) REFERENCES units (id),
    CONSTRAINT unit_outcomes_person FOREIGN KEY (set_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS sources (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    name VARCHAR(60) NOT NULL,
    vacuum_nm DOUBLE NOT NULL,
    u_nm DOUBLE NOT NULL,
    note VARCHAR(300) NOT NULL DEFAULT '',
    created_by INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY sources_name (name),
    CONSTRAINT sources_person FOREIGN KEY (created_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
}
