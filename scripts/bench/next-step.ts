import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { xoroshiro128plus } from "pure-rand";
import { createCampaign } from "@/lib/campaigns/create";
import { queueCampaign } from "@/lib/campaigns/queue";
import { sequelize } from "@/lib/db";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { createFirstAdministrator } from "@/lib/people/create-administrator";
import { createProtocol } from "@/lib/protocols/create";
import { createRig } from "@/lib/rigs/create";
import { createAgentToken } from "@/lib/rigs/tokens";
import { createSensor } from "@/lib/sensors/create";
import { migrate } from "@/scripts/migrate";
import { ensureBuild } from "../lib/build.mjs";
import { openDataDirectory } from "../lib/data-directory.mjs";
import { demoEnvironment } from "../lib/demo-environment.mjs";
import { freePort } from "../lib/ports.mjs";
import { ensureDatabase, startPostgres } from "../lib/postgres.mjs";
import { waitForAnswer, webService, workerService } from "../lib/services.mjs";
import { type Service, supervise } from "../lib/supervise.mjs";
import type { BenchResult } from "./fits";

const SWEEPS = 200;
const POINTS = 61;
const ROUNDS = 40;
const WARM_UP = 10;
/** Milliseconds that the design allows from `finish` to the next step, at the 95th percentile. */
const WANTED_MS = 150;

type Step = { id: string; kind: string; lease: string; params: { repeats: number; sweep: { startHz: number; stopHz: number; points: number } } };

/** From sending `finish` to holding the next step, with 200 sweeps in the phase: built web and worker, loopback, one rig. */
export async function run(): Promise<BenchResult[]> {
  const undoing: (() => Promise<void> | void)[] = [];
  try {
    const { url, token } = await startUp((undo) => undoing.push(undo));
    const times = await measure(url, token);
    const sorted = times.toSorted((a, b) => a - b);
    const at = (share: number) => sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)];
    return [
      { name: "finish to next step, 200 sweeps, p50", value: Math.round(at(0.5)), unit: "ms" },
      { name: "finish to next step, 200 sweeps, p95", value: Math.round(at(0.95)), unit: "ms", ratio: WANTED_MS / at(0.95) },
    ];
  } finally {
    for (const undo of undoing.reverse()) await undo();
  }
}

async function measure(url: string, token: string): Promise<number[]> {
  const agent = agentOf(url, token);
  await agent("hello", {
    agent: { name: "bench", version: "1", instance: "bench" },
    clock: new Date().toISOString(),
    abilities: { minHz: 100, maxHz: 20_000, maxPoints: 2001, maxDriveV: 1, ports: 1, kinds: ["measure"] },
  });
  const times: number[] = [];
  let step = await nextStep(agent);
  while (times.length < WARM_UP + ROUNDS) {
    const { id, lease, params } = step;
    const readings = Array.from({ length: params.repeats }, (_, index) => reading(step, index));
    for (let from = 0; from < readings.length; from += 50) await agent(`steps/${id}/readings`, { lease, readings: readings.slice(from, from + 50) });
    const begun = performance.now();
    await agent(`steps/${id}/finish`, { lease, outcome: "done" });
    step = await nextStep(agent);
    if (params.repeats === SWEEPS) times.push(performance.now() - begun);
  }
  return times.slice(WARM_UP);
}

type Agent = (path: string, body: object) => Promise<unknown>;

function agentOf(url: string, token: string): Agent {
  return async (path, body) => {
    const headers = { authorization: `Bearer ${token}`, "content-type": "application/json" };
    const answer = await fetch(`${url}/api/agent/${path}`, { method: "POST", headers, body: JSON.stringify(body) });
    if (!answer.ok) throw new Error(`${path}: ${answer.status} ${await answer.text()}`);
    return answer.status === 204 ? undefined : answer.json();
  };
}

async function nextStep(agent: Agent): Promise<Step> {
  const step = (await agent("steps/next", { waitS: 20 })) as Step | undefined;
  if (!step) throw new Error("no step came within 20 s");
  return step;
}

const random = xoroshiro128plus(20_260_102);
const noise = (): number => ((random.unsafeNext() >>> 0) / 2 ** 32 - 0.5) * 2e-4;

/** A sweep of a sensor with f0 2400 Hz and Q 2000 as an agent sends it. */
function reading({ params: { sweep } }: Step, index: number) {
  const frequencyHz = linearGrid(sweep.startHz, sweep.stopHz, sweep.points);
  const model = { readout: "velocity" as const, f0Hz: 2400 * (1 + noise() * 1e-2), q: 2000, a: { re: 0.1, im: 0.02 }, b: { re: 0.001, im: 0 }, c: { re: 0, im: 0 } };
  const { re, im } = evaluateResonance(frequencyHz, model);
  const { startHz, stopHz } = sweep;
  const list = (values: Float64Array) => Array.from(values, (value) => value + noise() * 0.01);
  return { index, takenAt: new Date().toISOString(), temperatureC: 20, sweep: { startHz, stopHz, re: list(re), im: list(im) } };
}

/** PostgreSQL, web and worker in a folder of their own, and one rig with a campaign of nothing but air. */
async function startUp(later: (undo: () => Promise<void> | void) => void): Promise<{ url: string; token: string }> {
  const root = path.resolve(import.meta.dirname, "../..");
  await ensureBuild({ root, distDir: ".next", step: (_title, work) => work() });
  const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-bench-"));
  fs.chmodSync(home, 0o711);
  later(() => fs.rmSync(home, { recursive: true, force: true }));
  const cluster = await startPostgres({ directory: path.join(home, "postgres"), port: await freePort() });
  later(() => cluster.stop());
  await ensureDatabase(cluster, "longreed");
  const databaseUrl = cluster.urlOf("longreed");
  await migrate(databaseUrl);

  const data = openDataDirectory(home);
  const ports = { web: await freePort(), smtp: await freePort() };
  const env = demoEnvironment({ given: { ...process.env, APP_URL: undefined }, dataDirectory: data.directory, ports, databaseUrl, authSecret: data.secrets().authSecret });
  Object.assign(process.env, { DATABASE_URL: databaseUrl, AUTH_SECRET: env.AUTH_SECRET, SMTP_URL: env.SMTP_URL, APP_URL: env.APP_URL, LONGREED_DEMO: "1" });
  later(() => sequelize.close());
  const start = (service: Service) =>
    later(supervise(service, { root, logDirectory: data.logDirectory, notice: (line) => console.error(line), onStart: () => undefined }).stop);
  start(webService({ root, env, port: ports.web, distDir: ".next" }));
  start(workerService({ root, env }));
  const url = `http://127.0.0.1:${ports.web}`;
  const token = await makeCampaign();
  await waitForAnswer(`${url}/sign-in`, { withinMs: 60_000 });
  return { url, token };
}

async function makeCampaign(): Promise<string> {
  const now = new Date();
  const person = await createFirstAdministrator({ email: "bench@longreed.example", name: "Bench", password: "of no use elsewhere", now });
  const by = { id: person.id, name: person.name, role: person.role };
  const { id: rigId } = await createRig({ by, now, name: "Bench", timeZone: "UTC", ports: 1 });
  const { token } = await createAgentToken({ by, now, rigId, name: "bench" });
  const { id: sensorId } = await createSensor({ by, now, serial: "BENCH-1", kind: "wire", nominalF0Hz: 2400, nominalQ: 2000 });
  await mountSensor({ by, now, sensorId, rigId });
  const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: POINTS, dwell: { s: 0.01 }, driveV: 0.1 };
  const { versionId } = await createProtocol({
    by,
    now,
    definition: {
      name: "Air, 200 repeats",
      readout: "velocity",
      blocks: [{ kind: "repeat", times: 1000, blocks: [{ kind: "measure", medium: "air", repeats: SWEEPS, sweep }] }],
      limits: [
        { kind: "return", tolerancePpm: 1000, does: ["mail"] },
        { kind: "drift", quantity: "f0", ppmPerDay: 1e6, does: ["mail"] },
        { kind: "fit", sharePercent: 50, does: ["mail"] },
      ],
    },
  });
  const { id: campaignId } = await createCampaign({ by, now, protocolVersionId: versionId, sensorId, rigId, slots: {} });
  await queueCampaign({ by, now, campaignId });
  return token;
}
