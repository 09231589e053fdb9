interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * The value of a reading as its specification asks for it, with its whole budget and what drawing the budget gave. Readings
 * of before have none. A specification may name a temperature its limits hold at, and the method.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS reading_values (
    reading_id INT UNSIGNED NOT NULL PRIMARY KEY,
    value_json MEDIUMTEXT NOT NULL,
    monte_carlo_json TEXT NULL,
    CONSTRAINT reading_values_reading FOREIGN KEY (reading_id) REFERENCES readings (id)
  ) ENGINE=InnoDB`);
  for (const verb of ['UPDATE', 'DELETE']) {
    await run(
      `CREATE OR REPLACE TRIGGER reading_values_no_${verb.toLowerCase()} BEFORE ${verb} ON reading_values FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of reading_values are never changed or deleted'`,
    );
  }
  await run('ALTER TABLE specifications ADD COLUMN IF NOT EXISTS at_temperature_c DOUBLE NULL');
  await run('ALTER TABLE specifications ADD COLUMN IF NOT EXISTS nm_per_k DOUBLE NULL');
  await run('ALTER TABLE specifications ADD COLUMN IF NOT EXISTS u_nm_per_k DOUBLE NULL');
}
