interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** A specification may ask for one method of finding the wavelength; null leaves it to the bench. */
export async function up({ context: run }: Step): Promise<void> {
  await run('ALTER TABLE specifications ADD COLUMN IF NOT EXISTS method VARCHAR(12) NULL');
}
