import path from "node:path";
import { pathToFileURL } from "node:url";
import pg from "pg";
import { type QueryInterface, Sequelize } from "sequelize";
import { Umzug } from "umzug";
import { z } from "zod";

type Migration = Record<"up" | "down", (input: { context: QueryInterface }) => Promise<void>>;

/** Any number; the same in every process that migrates. */
const lockKey = 7_316_400;

/**
 * Brings the database up to date and answers the names of the migrations that ran. Processes that start together
 * wait for each other. Each migration and its record are one transaction: a failed one leaves nothing behind.
 */
export async function migrate(databaseUrl: string): Promise<string[]> {
  return withMigrator(databaseUrl, async (migrator) => {
    const done = await migrator.up();
    return done.map(({ name }) => name);
  });
}

/** Takes back the last migration, or all down to and including `to`. */
export async function migrateDown(databaseUrl: string, to?: string): Promise<string[]> {
  return withMigrator(databaseUrl, async (migrator) => {
    const undone = await migrator.down(to ? { to } : undefined);
    return undone.map(({ name }) => name);
  });
}

async function withMigrator<T>(databaseUrl: string, work: (migrator: Umzug<QueryInterface>) => Promise<T>): Promise<T> {
  const lock = new pg.Client({ connectionString: databaseUrl });
  // With a single connection, what a migration sends between BEGIN and COMMIT cannot leave the transaction.
  const sequelize = new Sequelize(databaseUrl, {
    dialect: "postgres",
    dialectModule: pg,
    logging: false,
    pool: { min: 0, max: 1 },
  });
  await lock.connect();
  try {
    await lock.query("SELECT pg_advisory_lock($1)", [lockKey]);
    await sequelize.query(
      `CREATE TABLE IF NOT EXISTS migration (name text PRIMARY KEY, "executedAt" timestamptz NOT NULL DEFAULT now())`,
    );
    return await work(migratorOf(sequelize));
  } finally {
    await sequelize.close();
    await lock.end();
  }
}

function migratorOf(sequelize: Sequelize): Umzug<QueryInterface> {
  const inTransaction = async (work: () => Promise<unknown>) => {
    await sequelize.query("BEGIN");
    try {
      await work();
      await sequelize.query("COMMIT");
    } catch (error) {
      await sequelize.query("ROLLBACK");
      throw error;
    }
  };

  return new Umzug<QueryInterface>({
    migrations: {
      glob: ["*.ts", { cwd: path.resolve(import.meta.dirname, "../migrations") }],
      resolve: ({ name: file, path: location, context }) => {
        const name = path.basename(file, ".ts");
        const load = async (): Promise<Migration> => import(pathToFileURL(location ?? file).href);
        return {
          name,
          up: () =>
            inTransaction(async () => {
              await (await load()).up({ context });
              await sequelize.query("INSERT INTO migration (name) VALUES ($name)", { bind: { name } });
            }),
          down: () =>
            inTransaction(async () => {
              await (await load()).down({ context });
              await sequelize.query("DELETE FROM migration WHERE name = $name", { bind: { name } });
            }),
        };
      },
    },
    context: sequelize.getQueryInterface(),
    // The record is written above, inside the migration's own transaction.
    storage: {
      logMigration: async () => undefined,
      unlogMigration: async () => undefined,
      executed: async () => {
        const [rows] = await sequelize.query("SELECT name FROM migration ORDER BY name");
        return z.array(z.object({ name: z.string() })).parse(rows).map(({ name }) => name);
      },
    },
    logger: undefined,
  });
}

async function main([direction = "up", to]: string[]): Promise<void> {
  await import("./lib/env-file.mjs");
  const { env } = await import("@/lib/env");
  const names = await (direction === "down" ? migrateDown(env().DATABASE_URL, to) : migrate(env().DATABASE_URL));
  console.log(names.map((name) => `${direction} ${name}`).join("\n") || "The database is up to date.");
}

if (process.argv[1] && import.meta.filename === path.resolve(process.argv[1])) {
  main(process.argv.slice(2)).catch((error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    process.exitCode = 1;
  });
}
