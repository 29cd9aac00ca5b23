import pg from "pg";
import { Sequelize, type Transaction } from "sequelize";

const holder = globalThis as typeof globalThis & { longreedSequelize?: Sequelize };

/** Read when the first connection is made, so that a build or a test may import models before there is a database. */
function useDatabaseUrl(config: { host?: string; port?: string | number; username?: string; password?: string | null; database?: string }) {
  const address = process.env.DATABASE_URL;
  if (!address) throw new Error("DATABASE_URL is not set: it names the PostgreSQL database to use");
  const url = new URL(address);
  config.host = decodeURIComponent(url.hostname);
  config.port = url.port || "5432";
  config.username = decodeURIComponent(url.username);
  config.password = decodeURIComponent(url.password) || null;
  config.database = decodeURIComponent(url.pathname.slice(1));
}

/** One instance a process; on `globalThis` it survives hot reload. */
export const sequelize = (holder.longreedSequelize ??= new Sequelize({
  dialect: "postgres",
  dialectModule: pg,
  logging: false,
  define: { underscored: true, timestamps: false, freezeTableName: true },
  pool: { max: Number(process.env.DATABASE_POOL ?? 10), idle: 30_000, acquire: 10_000 },
  hooks: { beforeConnect: useDatabaseUrl },
}));

/** Runs a use case in one transaction: everything or nothing. */
export function inTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  return sequelize.transaction(work);
}

/** Rows of a query written by hand. `bind` values are sent apart from the text. */
export async function rows<Row extends object>(
  sql: string,
  bind: readonly unknown[] = [],
  transaction?: Transaction,
): Promise<Row[]> {
  const [result] = await sequelize.query(sql, { bind: [...bind], transaction, raw: true });
  return result as Row[];
}

/** The first row of a query written by hand, or undefined. */
export async function row<Row extends object>(sql: string, bind: readonly unknown[] = [], transaction?: Transaction): Promise<Row | undefined> {
  return (await rows<Row>(sql, bind, transaction))[0];
}

/** Rows that an update, insert or delete changed. */
export async function change(sql: string, bind: readonly unknown[] = [], transaction?: Transaction): Promise<number> {
  const [, meta] = await sequelize.query(sql, { bind: [...bind], transaction, raw: true });
  return (meta as { rowCount?: number }).rowCount ?? (meta as unknown as number);
}
