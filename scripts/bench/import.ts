import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { Client } from "pg";
import { from as copyFrom } from "pg-copy-streams";
import { xoroshiro128plus } from "pure-rand";
import { sequelize } from "@/lib/db";
import { acceptImport } from "@/lib/imports/accept";
import { receiveImport } from "@/lib/imports/receive";
import { runImport } from "@/lib/imports/run";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { createFirstAdministrator } from "@/lib/people/create-administrator";
import { migrate } from "@/scripts/migrate";
import { freePort } from "../lib/ports.mjs";
import { ensureDatabase, startPostgres } from "../lib/postgres.mjs";
import type { BenchResult } from "./fits";

const ROWS = 1_000_000;
const CYCLES = 200;
const SWEEPS = 5000;
const POINTS = 201;
const WANTED_S = 60;
const WANTED_SWEEPS = 1000;

/** From the upload to the finished campaign with closed phases, in one process beside the database; and the same bytes by plain COPY. */
export async function run(): Promise<BenchResult[]> {
  const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-bench-"));
  fs.chmodSync(home, 0o711);
  const cluster = await startPostgres({ directory: path.join(home, "postgres"), port: await freePort() });
  try {
    await ensureDatabase(cluster, "longreed");
    const url = cluster.urlOf("longreed");
    await migrate(url);
    Object.assign(process.env, { DATABASE_URL: url, AUTH_SECRET: "of the bench, of no use elsewhere at all", SMTP_URL: "smtp://127.0.0.1:1" });
    const now = new Date();
    const by = await createFirstAdministrator({ email: "bench@longreed.example", name: "Bench", password: "of no use elsewhere", now });
    const person = { id: by.id, name: by.name, role: by.role };
    const values = valuesCsv();
    const valuesS = await timed(() => importText(person, values));
    const copyS = await timed(() => copyText(url, values));
    const wide = await timed(() => importText(person, sweepsCsv()));
    const long = await timed(() => importText(person, pointsCsv()));
    return [
      { name: "rows of f0 and Q imported", value: Math.round(ROWS / valuesS), unit: "rows/s", ratio: ROWS / valuesS / (ROWS / WANTED_S) },
      { name: "time of a million rows against plain COPY of the same bytes", value: Math.round((10 * valuesS) / copyS) / 10, unit: "times" },
      { name: "sweeps imported, one a line", value: Math.round(SWEEPS / wide), unit: "sweeps/s", ratio: SWEEPS / wide / WANTED_SWEEPS },
      { name: "sweeps imported, a line a point", value: Math.round(SWEEPS / long), unit: "sweeps/s", ratio: SWEEPS / long / WANTED_SWEEPS },
    ];
  } finally {
    await sequelize.close();
    await cluster.stop();
    fs.rmSync(home, { recursive: true, force: true });
  }
}

async function timed(work: () => Promise<void>): Promise<number> {
  const begun = performance.now();
  await work();
  return (performance.now() - begun) / 1000;
}

async function importText(by: Parameters<typeof acceptImport>[0]["by"], text: string): Promise<void> {
  const form = new FormData();
  form.set("file", new File([text], "bench.csv"));
  form.set("name", "Bench");
  const now = new Date();
  const received = await receiveImport({ request: new Request("http://bench.invalid", { method: "POST", body: form }), personId: by.id, now });
  const { status } = await acceptImport({ by, received, now });
  const outcome = status === 202 ? await runImport({ importRunId: received.importRunId, now }) : { state: "done" };
  if (outcome.state !== "done") throw new Error(JSON.stringify(outcome));
}

async function copyText(url: string, text: string): Promise<void> {
  const client = new Client({ connectionString: url });
  await client.connect();
  await client.query("create table plain (taken_at timestamptz, medium text, f0_hz float8, q float8, temperature_c float8, cycle int)");
  const stream = client.query(copyFrom("copy plain from stdin (format csv, header)"));
  await new Promise<void>((resolve, reject) => {
    stream.once("finish", resolve).once("error", reject);
    stream.end(text);
  });
  await client.end();
}

const random = xoroshiro128plus(20_260_104);
const noise = (): number => (random.unsafeNext() >>> 0) / 2 ** 32 - 0.5;
const at = (i: number) => new Date(Date.UTC(2025, 0, 1) + i * 10_000).toISOString();

function valuesCsv(): string {
  const lines = ["takenAt,medium,f0Hz,q,temperatureC,cycle"];
  const phase = ROWS / CYCLES / 2;
  for (let i = 0; i < ROWS; i++) {
    const air = Math.floor(i / phase) % 2 === 0;
    lines.push(`${at(i)},${air ? "air" : "water"},${((air ? 2400 : 2100) + 1e-3 * noise()).toFixed(6)},${((air ? 1800 : 90) + 0.1 * noise()).toFixed(3)},${(20 + 0.01 * noise()).toFixed(4)},${Math.floor(i / phase / 2) + 1}`);
  }
  return `${lines.join("\n")}\n`;
}

function aSweep(): { frequencyHz: Float64Array; re: string[]; im: string[] } {
  const frequencyHz = linearGrid(2395, 2405, POINTS);
  const { re, im } = evaluateResonance(frequencyHz, { readout: "velocity", f0Hz: 2400 + 0.01 * noise(), q: 2000, a: { re: 0.1, im: 0.02 }, b: { re: 0.001, im: 0 }, c: { re: 0, im: 0 } });
  const list = (values: Float64Array) => Array.from(values, (value) => (value + 2e-4 * noise()).toFixed(7));
  return { frequencyHz, re: list(re), im: list(im) };
}

function sweepsCsv(): string {
  const lines = Array.from({ length: SWEEPS }, (_, i) => {
    const { re, im } = aSweep();
    return `${at(i)},air,2395,2405,${re.join(" ")},${im.join(" ")}`;
  });
  return `takenAt,medium,startHz,stopHz,re,im\n${lines.join("\n")}\n`;
}

function pointsCsv(): string {
  const lines = Array.from({ length: SWEEPS }, (_, i) => {
    const { frequencyHz, re, im } = aSweep();
    return re.map((value, k) => `${at(i)},air,${frequencyHz[k].toFixed(2)},${value},${im[k]}`).join("\n");
  });
  return `takenAt,medium,frequencyHz,re,im\n${lines.join("\n")}\n`;
}
