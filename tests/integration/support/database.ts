import { QueryTypes, Sequelize } from 'sequelize';

/** The tests' own connection under the owner's account: to empty tables, and to tamper where a test must. */
function connect(url: string | undefined): Sequelize {
  if (!url) throw new Error('Integration tests need their services: run npm test -- integration');
  return new Sequelize(url, {
    dialect: 'mariadb',
    logging: false,
    timezone: '+00:00',
    dialectOptions: { logParam: false },
    pool: { max: 2 },
  });
}

let owner: Sequelize | undefined;

export function ownerDatabase(): Sequelize {
  owner ??= connect(process.env.DATABASE_OWNER_URL);
  return owner;
}

/** Empties every table. TRUNCATE needs the owner's rights and fires no trigger: the product's account can do neither. */
export async function emptyDatabase(): Promise<void> {
  const database = ownerDatabase();
  const tables = await database.query<{ name: string }>(
    `SELECT TABLE_NAME AS name FROM information_schema.TABLES WHERE TABLE_SCHEMA = DATABASE() AND TABLE_NAME <> 'migrations'`,
    { type: QueryTypes.SELECT },
  );
  await database.transaction(async (transaction) => {
    await database.query('SET FOREIGN_KEY_CHECKS = 0', { transaction });
    for (const { name } of tables) await database.query(`TRUNCATE TABLE \`${name}\``, { transaction });
    await database.query('SET FOREIGN_KEY_CHECKS = 1', { transaction });
  });
  await database.query("INSERT INTO audit_head (id, last_id, hash) VALUES (1, 0, REPEAT('0', 64))");
}

export async function rows<Row extends object>(
  sql: string,
  replacements: Record<string, unknown> = {},
): Promise<Row[]> {
  return ownerDatabase().query<Row>(sql, { type: QueryTypes.SELECT, replacements });
}

export async function closeOwner(): Promise<void> {
  await owner?.close();
  owner = undefined;
}
