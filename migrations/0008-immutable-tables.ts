interface Step {
  context: (sql: string) => Promise<unknown>;
}

const IMMUTABLE = [
  'setups',
  'readings',
  'reading_results',
  'signatures',
  'returns',
  'look_answers',
  'unit_outcomes',
  'audit_rows',
];

/** Whoever holds the rights to try: rows of these tables are neither changed nor deleted. */
export async function up({ context: run }: Step): Promise<void> {
  for (const table of IMMUTABLE) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
