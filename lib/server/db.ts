import 'server-only';
import { QueryTypes, Sequelize, type Transaction } from 'sequelize';
import { defineTables, type Tables } from '@/models';
import { env } from './env';

interface Database {
  sequelize: Sequelize;
  tables: Tables;
}

// The server is bundled in several pieces; the pool is one per process, not one per piece.
const held = globalThis as { midfringeDatabase?: Database };

export function db(): Database {
  if (!held.midfringeDatabase) {
    const sequelize = new Sequelize(env().DATABASE_URL, {
      dialect: 'mariadb',
      logging: false,
      timezone: '+00:00',
      define: { timestamps: false, underscored: true, freezeTableName: true },
      pool: { max: 12, min: 0, acquire: 20_000, idle: 30_000 },
      dialectOptions: {
        supportBigNumbers: false,
        bigIntAsNumber: true,
        insertIdAsNumber: true,
        logParam: false,
        connectTimeout: 10_000,
        charset: 'utf8mb4',
      },
    });
    held.midfringeDatabase = { sequelize, tables: defineTables(sequelize) };
  }
  return held.midfringeDatabase;
}

export async function closeDatabase(): Promise<void> {
  const open = held.midfringeDatabase;
  held.midfringeDatabase = undefined;
  await open?.sequelize.close();
}

type Values = Record<string, unknown>;

/** Rows of a SELECT written by hand; values go in as replacements only. */
export function select<Row extends object>(
  sql: string,
  replacements: Values = {},
  transaction?: Transaction,
): Promise<Row[]> {
  return db().sequelize.query<Row>(sql, { type: QueryTypes.SELECT, replacements, transaction });
}

/** Runs an UPDATE or DELETE and answers how many rows it met. */
export async function change(sql: string, replacements: Values, transaction?: Transaction): Promise<number> {
  const [, met] = await db().sequelize.query(sql, { type: QueryTypes.UPDATE, replacements, transaction });
  return met;
}
