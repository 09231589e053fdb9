/**
 * Brings the database to the newest schema under the owner's account, then gives the application's account the
 * rights it needs and no more: tables that carry a trigger against UPDATE can be read and added to, nothing else.
 */
import path from 'node:path';
import { DatabaseError, QueryTypes, Sequelize } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';

const IMMUTABLE_RIGHTS = 'SELECT, INSERT';
const MUTABLE_RIGHTS = 'SELECT, INSERT, UPDATE, DELETE';

interface Applied {
  applied: string[];
}

export async function migrate(ownerUrl: string, appUrl: string, appHost = '%'): Promise<Applied> {
  const sequelize = new Sequelize(ownerUrl, {
    dialect: 'mariadb',
    logging: false,
    timezone: '+00:00',
    dialectOptions: { logParam: false },
    pool: { max: 1 },
  });
  try {
    const umzug = new Umzug({
      migrations: { glob: path.join(__dirname, '..', 'migrations', '*.ts') },
      context: () => (sql: string) => sequelize.query(sql),
      storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
      logger: undefined,
    });
    const done = await umzug.up();
    await grantRights(sequelize, ownerUrl, appUrl, appHost);
    return { applied: done.map((step) => step.name) };
  } finally {
    await sequelize.close();
  }
}

async function grantRights(
  sequelize: Sequelize,
  ownerUrl: string,
  appUrl: string,
  appHost: string,
): Promise<void> {
  const app = new URL(appUrl);
  const owner = new URL(ownerUrl);
  if (app.username === owner.username) return; // one account only: the triggers alone keep the records
  const database = decodeURIComponent(owner.pathname.slice(1));
  const tables = await sequelize.query<{ name: string; guarded: number }>(
    `SELECT t.TABLE_NAME AS name, EXISTS (
       SELECT 1 FROM information_schema.TRIGGERS g WHERE g.TRIGGER_SCHEMA = t.TABLE_SCHEMA
       AND g.EVENT_OBJECT_TABLE = t.TABLE_NAME AND g.EVENT_MANIPULATION = 'UPDATE') AS guarded
     FROM information_schema.TABLES t WHERE t.TABLE_SCHEMA = :database`,
    { type: QueryTypes.SELECT, replacements: { database } },
  );
  const account = `${sequelize.escape(decodeURIComponent(app.username))}@${sequelize.escape(appHost)}`;
  const statements = tables
    .filter((table) => table.name !== 'migrations')
    .map((table) => {
      const rights = table.guarded ? IMMUTABLE_RIGHTS : MUTABLE_RIGHTS;
      return `GRANT ${rights} ON \`${database}\`.\`${table.name}\` TO ${account}`;
    });
  try {
    for (const statement of statements) await sequelize.query(statement);
  } catch (problem) {
    if (!(problem instanceof DatabaseError)) throw problem;
    console.warn(
      `The owner account may not grant rights (${problem.message}). Have the database's administrator run:\n` +
        `${statements.join(';\n')};`,
    );
  }
}

async function main(): Promise<void> {
  const appUrl = process.env.DATABASE_URL;
  const ownerUrl = process.env.DATABASE_OWNER_URL ?? appUrl;
  if (!appUrl || !ownerUrl)
    throw new Error('Set DATABASE_URL, and DATABASE_OWNER_URL for an owner account of its own.');
  const { applied } = await migrate(ownerUrl, appUrl, process.env.DATABASE_APP_HOST);
  console.log(applied.length ? `Migrations applied: ${applied.join(', ')}` : 'The database is up to date.');
}

if (require.main === module) {
  main().catch((problem: unknown) => {
    console.error(problem instanceof Error ? problem.message : problem);
    process.exitCode = 1;
  });
}
