interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Air and temperature as somebody read them: of a bench from then on, or of one frame. Never changed; the newest counts.
 * A half width stands beside each value.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS conditions (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    bench_id INT UNSIGNED NOT NULL,
    frame_id INT UNSIGNED NULL,
    air_temperature_c DOUBLE NULL,
    air_temperature_half_c DOUBLE NULL,
    pressure_pa DOUBLE NULL,
    pressure_half_pa DOUBLE NULL,
    humidity_percent DOUBLE NULL,
    humidity_half_percent DOUBLE NULL,
    co2_ppm DOUBLE NULL,
    co2_half_ppm DOUBLE NULL,
    source_temperature_c DOUBLE NULL,
    source_temperature_half_c DOUBLE NULL,
    entered_by INT UNSIGNED NOT NULL,
    entered_at DATETIME(3) NOT NULL,
    KEY conditions_bench (bench_id, frame_id, entered_at),
    KEY conditions_frame (frame_id, id),
    CONSTRAINT conditions_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT conditions_frame FOREIGN KEY (frame_id) REFERENCES frames (id),
    CONSTRAINT conditions_person FOREIGN KEY (entered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER conditions_no_${verb.toLowerCase()} BEFORE ${verb} ON conditions FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of conditions are never changed or deleted'`,
    );
  }
}
