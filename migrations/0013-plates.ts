interface Step {
  context: (sql: string) => Promise<unknown>;
}

const VALUES = ['separation', 'width'] as const;
const columnsOf = (name: string) => [
  `${name}_um`,
  `${name}_stated`,
  `${name}_shape`,
  `${name}_k`,
  `${name}_dof`,
];
const COLUMNS = VALUES.flatMap(columnsOf);

/**
 * Setups that name a plate in words, with the plate's name. The same name on two benches has to mean two plates: one
 * cannot be in two places. Setups that have their plate already are left alone, so a second run finds none.
 */
const NAMED = `(SELECT s.*, IF((SELECT COUNT(DISTINCT o.bench_id) FROM setups o WHERE o.plate = s.plate) > 1,
    CONCAT(s.plate, ' (', b.name, ')'), s.plate) AS plate_name
  FROM setups s JOIN benches b ON b.id = s.bench_id
  WHERE NOT EXISTS (SELECT 1 FROM setup_plates x WHERE x.setup_id = s.id))`;

/** Both certificates of a setup as one text. */
const CERTIFICATE = `LEFT(IF(n.width_certificate IN ('', n.separation_certificate), n.separation_certificate,
  CONCAT_WS(', ', NULLIF(n.separation_certificate, ''), n.width_certificate)), 300)`;
const DUE = 'LEAST(COALESCE(n.separation_due, n.width_due), COALESCE(n.width_due, n.separation_due))';

/**
 * Slit plates with their certificates, and where they are mounted. A certificate is added, never changed; which one a
 * setup took its copy from is kept beside it. A plate is open on one bench at most, a bench holds one plate at most:
 * both are unique keys. Plates that setups named in words become plates here, with what those setups stated of them.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS plates (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    name VARCHAR(130) NOT NULL,
    note VARCHAR(300) NOT NULL DEFAULT '',
    created_by INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY plates_name (name),
    CONSTRAINT plates_person FOREIGN KEY (created_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS plate_certificates (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    plate_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    ${VALUES.map(
      (name) => `
    ${name}_um DOUBLE NOT NULL,
    ${name}_stated DOUBLE NOT NULL,
    ${name}_shape VARCHAR(12) NOT NULL,
    ${name}_k DOUBLE NOT NULL,
    ${name}_dof DOUBLE NULL,`,
    ).join('')}
    certificate VARCHAR(300) NOT NULL DEFAULT '',
    file CHAR(64) CHARACTER SET ascii NULL,
    due DATE NULL,
    confirmed_json TEXT NOT NULL DEFAULT '[]',
    entered_by INT UNSIGNED NOT NULL,
    entered_at DATETIME(3) NOT NULL,
    UNIQUE KEY plate_certificates_number (plate_id, number),
    CONSTRAINT plate_certificates_plate FOREIGN KEY (plate_id) REFERENCES plates (id),
    CONSTRAINT plate_certificates_person FOREIGN KEY (entered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS setup_plates (
    setup_id INT UNSIGNED NOT NULL PRIMARY KEY,
    plate_id INT UNSIGNED NOT NULL,
    certificate_id INT UNSIGNED NOT NULL,
    CONSTRAINT setup_plates_setup FOREIGN KEY (setup_id) REFERENCES setups (id),
    CONSTRAINT setup_plates_plate FOREIGN KEY (plate_id) REFERENCES plates (id),
    CONSTRAINT setup_plates_certificate FOREIGN KEY (certificate_id) REFERENCES plate_certificates (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS plate_mounts (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    plate_id INT UNSIGNED NOT NULL,
    bench_id INT UNSIGNED NOT NULL,
    from_at DATETIME(3) NOT NULL,
    to_at DATETIME(3) NULL,
    is_open TINYINT AS (IF(to_at IS NULL, 1, NULL)) STORED,
    mounted_by INT UNSIGNED NOT NULL,
    UNIQUE KEY plate_mounts_plate (plate_id, is_open),
    UNIQUE KEY plate_mounts_bench (bench_id, is_open),
    KEY plate_mounts_time (bench_id, from_at),
    CONSTRAINT plate_mounts_plate FOREIGN KEY (plate_id) REFERENCES plates (id),
    CONSTRAINT plate_mounts_bench FOREIGN KEY (bench_id) REFERENCES benches (id),
    CONSTRAINT plate_mounts_person FOREIGN KEY (mounted_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  // Wide enough for the name of a plate with that of its bench.
  await run(`ALTER TABLE setups MODIFY COLUMN plate VARCHAR(130) NOT NULL`);
  await run(`INSERT INTO plates (name, created_by, created_at)
    SELECT f.plate_name, n.entered_by, n.entered_at FROM (
      SELECT plate_name, MIN(id) AS first_id FROM ${NAMED} g GROUP BY plate_name) f
    JOIN setups n ON n.id = f.first_id
    WHERE NOT EXISTS (SELECT 1 FROM plates p WHERE p.name = f.plate_name)`);
  // The newest revision is the one used last, whatever was stated in between.
  await run(`INSERT INTO plate_certificates (plate_id, number, ${COLUMNS.join(', ')}, certificate, file, due, entered_by, entered_at)
    SELECT p.id, ROW_NUMBER() OVER (PARTITION BY p.id ORDER BY f.last_id),
      ${COLUMNS.map((column) => `n.${column}`).join(', ')}, ${CERTIFICATE}, n.separation_file, ${DUE}, n.entered_by, n.entered_at
    FROM (SELECT plate_name, MIN(id) AS first_id, MAX(id) AS last_id FROM ${NAMED} g
      GROUP BY plate_name, ${COLUMNS.join(', ')}, separation_certificate, width_certificate, separation_due, width_due) f
    JOIN setups n ON n.id = f.first_id JOIN plates p ON p.name = f.plate_name
    WHERE NOT EXISTS (SELECT 1 FROM plate_certificates c WHERE c.plate_id = p.id)`);
  await run(`INSERT INTO setup_plates (setup_id, plate_id, certificate_id)
    SELECT n.id, p.id, MAX(c.id) FROM ${NAMED} n JOIN plates p ON p.name = n.plate_name
    JOIN plate_certificates c ON c.plate_id = p.id AND c.certificate = ${CERTIFICATE} AND c.due <=> ${DUE}
      AND ${COLUMNS.map((column) => `c.${column} <=> n.${column}`).join(' AND ')}
    GROUP BY n.id, p.id`);
  await run(`INSERT INTO plate_mounts (plate_id, bench_id, from_at, to_at, mounted_by)
    SELECT x.plate_id, s.bench_id, COALESCE(d.in_force_from, s.entered_at),
      LEAD(COALESCE(d.in_force_from, s.entered_at)) OVER (
        PARTITION BY s.bench_id ORDER BY COALESCE(d.in_force_from, s.entered_at), s.number),
      s.entered_by
    FROM setups s JOIN setup_plates x ON x.setup_id = s.id LEFT JOIN setup_decisions d ON d.setup_id = s.id
    WHERE (NOT s.needs_approval OR d.decision = 'approved')
      AND NOT EXISTS (SELECT 1 FROM plate_mounts m WHERE m.bench_id = s.bench_id)`);
  for (const table of ['plate_certificates', 'setup_plates']) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
