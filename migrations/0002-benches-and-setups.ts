interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** One value of a setup as it was entered: value, stated uncertainty, its k, certificate, due date. */
const stated = (name: string, unit: string) => `
    ${name}_${unit} DOUBLE NOT NULL,
    ${name}_stated DOUBLE NOT NULL,
    ${name}_k DOUBLE NOT NULL,
    ${name}_certificate VARCHAR(300) NOT NULL DEFAULT '',
    ${name}_due DATE NULL,`;

/** Benches and their setups. A setup is never changed: the one with the highest number is in force. */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS benches (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    name VARCHAR(60) NOT NULL,
    note VARCHAR(1000) NOT NULL DEFAULT '',
    created_by INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY benches_name (name),
    CONSTRAINT benches_person FOREIGN KEY (created_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS setups (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    plate VARCHAR(60) NOT NULL,
    ${stated('scale', 'um_per_px')}
    ${stated('separation', 'um')}
    ${stated('width', 'um')}
    ${stated('distance', 'mm')}
    remount_u_nm DOUBLE NULL,
    remount_dof DOUBLE NULL,
    tone VARCHAR(10) NOT NULL,
    why VARCHAR(1000) NOT NULL,
    entered_by INT UNSIGNED NOT NULL,
    entered_at DATETIME(3) NOT NULL,
    UNIQUE KEY setups_number (bench_id, number),
    CONSTRAINT setups_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT setups_person FOREIGN KEY (entered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
}
