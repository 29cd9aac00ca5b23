import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import pg from "pg";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { freePort } from "@/scripts/lib/ports.mjs";
import { type Cluster, ensureDatabase, startPostgres } from "@/scripts/lib/postgres.mjs";
import { watchPostgres } from "@/scripts/lib/watch-postgres.mjs";

const password = "demo-of-this-test";
let home: string;
let cluster: Cluster | undefined;

beforeEach(() => {
  home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-cluster-"));
  fs.chmodSync(home, 0o711);
});

afterEach(async () => {
  await cluster?.stop();
  cluster = undefined;
  fs.rmSync(home, { recursive: true });
});

const directory = () => path.join(home, "postgres");
const lock = () => path.join(directory(), "postmaster.pid");

async function start({ durable = false } = {}): Promise<Cluster> {
  return (cluster = await startPostgres({ directory: directory(), port: await freePort(), password, durable }));
}

async function ask(url: string, sql: string): Promise<unknown> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query<[unknown]>({ text: sql, rowMode: "array" });
    return rows[0]?.[0];
  } finally {
    await client.end();
  }
}

test("a new cluster is private, on loopback, never root's, and asks for its password", async () => {
  const { urlOf } = await start();
  await ensureDatabase(cluster!, "longreed");
  await ensureDatabase(cluster!, "longreed");
  expect(await ask(urlOf("longreed"), "SHOW listen_addresses")).toBe("127.0.0.1");
  expect(fs.statSync(directory()).mode & 0o777).toBe(0o700);
  expect(fs.statSync(lock()).uid).not.toBe(0);
  await expect(ask(urlOf("longreed").replace(password, "wrong"), "SELECT 1")).rejects.toThrow(/password authentication failed/);
});

test("what was written is there after a stop and a start on another port", async () => {
  const first = await start();
  await ask(first.urlOf("postgres"), "CREATE TABLE kept AS SELECT 42 AS answer");
  await first.stop();
  const second = await start();
  expect(second.port).not.toBe(first.port);
  expect(await ask(second.urlOf("postgres"), "SELECT answer FROM kept")).toBe(42);
});

test("a server that outlived its supervisor is picked up on the port it has", async () => {
  const first = await start();
  const second = await start();
  expect(second.port).toBe(first.port);
  expect(await ask(second.urlOf("postgres"), "SELECT 1")).toBe(1);
});

test("a lock left by a crash is recovered, even when its number belongs to another process by now", async () => {
  const first = await start();
  await ask(first.urlOf("postgres"), "CREATE TABLE kept AS SELECT 42 AS answer");
  const stale = fs.readFileSync(lock(), "utf8").replace(/^\d+/, String(process.pid));
  await first.stop();
  fs.writeFileSync(lock(), stale);
  const second = await start();
  expect(await ask(second.urlOf("postgres"), "SELECT answer FROM kept")).toBe(42);
});

test("a server that dies starts again on its port with all that was written, and it is said so", async () => {
  const first = await start({ durable: true });
  await ask(first.urlOf("postgres"), "CREATE TABLE kept AS SELECT 42 AS answer");
  const notices: string[] = [];
  const watch = watchPostgres(first, (line) => notices.push(line));
  process.kill(Number(fs.readFileSync(lock(), "utf8").split("\n")[0]), "SIGKILL");
  await vi.waitFor(() => expect(notices.at(-1)).toBe("PostgreSQL runs again"), { timeout: 20_000 });
  expect(notices[0]).toBe("PostgreSQL died; starting it again");
  expect(await ask(first.urlOf("postgres"), "SELECT answer FROM kept")).toBe(42);
  await watch.stop();
  expect(first.isRunning()).toBe(false);
});
