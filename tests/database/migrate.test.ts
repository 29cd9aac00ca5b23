import { randomUUID } from "node:crypto";
import pg from "pg";
import { afterEach, beforeEach, expect, inject, test } from "vitest";
import { migrate, migrateDown } from "@/scripts/migrate";
import { createDatabase, dropDatabase, urlOf } from "@/tests/setup/server";

const { serverUrl } = inject("postgres");
let name: string;
let url: string;

beforeEach(async () => {
  name = `longreed_${randomUUID().replaceAll("-", "")}`;
  url = urlOf(serverUrl, name);
  await createDatabase(serverUrl, name);
});

afterEach(() => dropDatabase(serverUrl, name));

async function column(sql: string): Promise<string[]> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query<[string]>({ text: sql, rowMode: "array" });
    return rows.map(([value]) => value);
  } finally {
    await client.end();
  }
}

const recorded = () => column("SELECT name FROM migration ORDER BY name");
const columns = () =>
  column(`SELECT concat_ws(' ', table_name, column_name, data_type, is_nullable, column_default)
          FROM information_schema.columns WHERE table_schema = 'public' ORDER BY 1`);
const tables = () => column("SELECT tablename FROM pg_tables WHERE schemaname = 'public' ORDER BY 1");

test("processes that start together migrate once", async () => {
  const runs = await Promise.all([migrate(url), migrate(url), migrate(url)]);
  const names = await recorded();
  expect(names.length).toBeGreaterThan(0);
  expect(runs.flat().sort()).toEqual(names);
  expect(await migrate(url)).toEqual([]);
});

test("every migration can be taken back and made again", async () => {
  const names = await migrate(url);
  const before = await columns();
  expect(await migrateDown(url, names[0])).toEqual([...names].reverse());
  expect(await tables()).toEqual(["migration"]);
  await migrate(url);
  expect(await columns()).toEqual(before);
});

test("a migration that fails leaves nothing behind and can be tried again", async () => {
  const [first] = await migrate(url);
  await migrateDown(url, first);
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  // In the way of a table that the first migration makes after others.
  await client.query("CREATE TABLE audit_event (in_the_way int)");
  await expect(migrate(url)).rejects.toThrow(/audit_event/);
  expect(await recorded()).toEqual([]);
  expect(await tables()).toEqual(["audit_event", "migration"]);
  await client.query("DROP TABLE audit_event");
  await client.end();
  expect(await migrate(url)).toContain(first);
});
