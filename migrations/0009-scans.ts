interface Step {
  context: (sql: string) => Promise<unknown>;
}

/**
 * Line scans beside pictures. A scan's frame has its length and the width of the detector instead of a size in px, its
 * readings have their spacing and zero order in mm instead of px.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`ALTER TABLE frames
    ADD COLUMN IF NOT EXISTS detector_mm DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS scan_from_mm DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS scan_to_mm DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS scan_points INT UNSIGNED NULL`);
  await run(`ALTER TABLE readings
    MODIFY COLUMN spacing_px DOUBLE NULL,
    MODIFY COLUMN u_spacing_px DOUBLE NULL,
    MODIFY COLUMN scale_um_per_px DOUBLE NULL,
    MODIFY COLUMN zero_along_px DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS spacing_mm DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS u_spacing_mm DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS zero_mm DOUBLE NULL`);
}
