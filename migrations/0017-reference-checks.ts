interface Step {
  context: (sql: string) => Promise<unknown>;
}

const TABLES = ['reference_checks', 'bench_stops', 'bench_releases', 'bench_rules'];

/**
 * What accepted readings of a reference say about their bench. A bench that was outside twice is stopped until somebody
 * releases it with a reason; its rules are the limit of a check and the method its wavelengths are found by. All are added
 * to, never changed; the newest rule counts.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS reference_checks (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    setup_id INT UNSIGNED NOT NULL,
    source_id INT UNSIGNED NOT NULL,
    reading_id INT UNSIGNED NOT NULL,
    published_nm DOUBLE NOT NULL,
    u_published_nm DOUBLE NOT NULL,
    measured_nm DOUBLE NOT NULL,
    u_measured_nm DOUBLE NOT NULL,
    deviation_nm DOUBLE NOT NULL,
    expanded_nm DOUBLE NOT NULL,
    limit_nm DOUBLE NOT NULL,
    own_limit BOOLEAN NOT NULL,
    inside BOOLEAN NOT NULL,
    made_at DATETIME(3) NOT NULL,
    UNIQUE KEY reference_checks_reading (reading_id),
    KEY reference_checks_bench (bench_id, id),
    CONSTRAINT reference_checks_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT reference_checks_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT reference_checks_source FOREIGN KEY (source_id) REFERENCES sources (id),
    CONSTRAINT reference_checks_reading FOREIGN KEY (reading_id) REFERENCES readings (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS bench_stops (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    check_id INT UNSIGNED NOT NULL,
    stopped_at DATETIME(3) NOT NULL,
    KEY bench_stops_bench (bench_id, id),
    CONSTRAINT bench_stops_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT bench_stops_check FOREIGN KEY (check_id) REFERENCES reference_checks (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS bench_releases (
    stop_id INT UNSIGNED NOT NULL PRIMARY KEY,
    after_check_id INT UNSIGNED NOT NULL,
    reason VARCHAR(1000) NOT NULL,
    released_by INT UNSIGNED NOT NULL,
    released_at DATETIME(3) NOT NULL,
    CONSTRAINT bench_releases_stop FOREIGN KEY (stop_id) REFERENCES bench_stops (id),
    CONSTRAINT bench_releases_person FOREIGN KEY (released_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS bench_rules (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    limit_nm DOUBLE NULL,
    method VARCHAR(12) NOT NULL,
    why VARCHAR(1000) NOT NULL,
    entered_by INT UNSIGNED NOT NULL,
    entered_at DATETIME(3) NOT NULL,
    KEY bench_rules_bench (bench_id, id),
    CONSTRAINT bench_rules_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT bench_rules_person FOREIGN KEY (entered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const table of TABLES) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
