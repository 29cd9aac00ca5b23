import { type ChildProcess, spawn } from "node:child_process";
import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterAll, beforeAll, expect, inject, it } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import { newToken } from "@/lib/tokens";
import { AgentToken } from "@/models/agent-token";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { nominalInAir } from "@/rig-simulator/physics/truth";
import { childrenOf } from "@/scripts/lib/run-lock.mjs";
import { buildCampaign } from "../factories/campaign";
import { buildMount } from "../factories/mount";
import { aDefinition, buildProtocolVersion } from "../factories/protocol";
import { buildRig } from "../factories/rig";
import { buildSensor } from "../factories/sensor";

const root = path.resolve(import.meta.dirname, "../..");
const { appUrl, dataDirectory } = inject("laboratory");

let folder: string;
let scenarioFile: string;
const simulators = new Set<ChildProcess>();

beforeAll(() => {
  folder = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-crash-"));
  scenarioFile = path.join(folder, "steady.json");
  const { name, description, rig, sensor } = loadScenario("quick");
  fs.writeFileSync(scenarioFile, JSON.stringify({ name, description, rig, sensor }));
});
afterAll(async () => {
  for (const simulator of simulators) simulator.kill("SIGKILL");
  await sequelize.close();
  fs.rmSync(folder, { recursive: true });
});

const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5.5 }, driveV: 0.5 };
const CYCLES = 12;
const AIR = 40;
const LIQUID = 40;
const TOTAL = CYCLES * (AIR + LIQUID);
const blocks: Definition["blocks"] = [
  {
    id: "cycles",
    kind: "repeat",
    times: CYCLES,
    blocks: [
      { id: "air", kind: "measure", medium: "air", role: "reference", repeats: AIR, discard: 2, pauseS: 2, sweep },
      { id: "fill", kind: "fill", slot: "sample", volumeMl: 20, flowMlPerMin: 10 },
      { id: "liquid", kind: "measure", medium: "sample", role: "sample", repeats: LIQUID, discard: 2, pauseS: 2, sweep },
      { id: "drain", kind: "drain" },
      { id: "rinse", kind: "rinse", slot: "sample", volumeMl: 10, times: 2 },
      { id: "dry", kind: "dry", seconds: 900 },
      { id: "rest", kind: "wait", seconds: 7200 },
    ],
  },
];

type Run = { campaignId: string; token: string; stateFolder: string };

/** A queued campaign on a rig of its own, the same each time. */
async function prepare(name: string): Promise<Run> {
  const { f0Hz, q } = nominalInAir(loadScenario("quick"));
  const rig = await buildRig({ clock: "simulated" });
  const sensor = await buildSensor({ nominalF0Hz: f0Hz, nominalQ: q });
  const { token, hash, last4 } = newToken("agent");
  await AgentToken.create({ rigId: rig.id, name: "simulator", tokenHash: hash, last4, createdAt: new Date() });
  const version = await buildProtocolVersion({
    definition: aDefinition({ blocks, limits: [{ id: "return", kind: "return", tolerancePpm: 500, does: ["mail"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }] }),
  });
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const campaign = await buildCampaign({ rigId: rig.id, sensorId: sensor.id, protocolVersionId: version.id, state: "queued" });
  return { campaignId: campaign.id, token, stateFolder: path.join(folder, name) };
}

const logOf = (stateFolder: string): string => `${stateFolder}.log`;

/** The simulator in a process of its own, as a laboratory runs it. */
function simulate({ token, stateFolder }: Run): ChildProcess {
  const options = ["--url", appUrl, "--token", token, "--scenario", scenarioFile, "--seed", "5", "--speed", "fast", "--clock-start", "2026-01-05T03:00:00Z", "--state", stateFolder];
  const log = fs.openSync(logOf(stateFolder), "a");
  const simulator = spawn(process.execPath, ["--import", "tsx", "rig-simulator/cli.ts", "run", ...options], { cwd: root, stdio: ["ignore", log, log] });
  fs.closeSync(log);
  simulators.add(simulator);
  return simulator;
}

async function strike(simulator: ChildProcess): Promise<void> {
  const ended = new Promise((resolve) => simulator.once("exit", resolve));
  simulator.kill("SIGKILL");
  await ended;
  simulators.delete(simulator);
}

/** Kills a supervised part of the laboratory, with all it started; its supervisor starts it again. */
function kill(name: "web" | "worker"): void {
  const { pid } = childrenOf(dataDirectory)[name];
  process.kill(-pid, "SIGKILL");
}

const cameBack = (name: "web" | "worker", before: number) =>
  expect.poll(() => childrenOf(dataDirectory)[name].pid, { timeout: 30_000, interval: 50 }).not.toBe(before);

async function stored({ campaignId }: Run): Promise<number> {
  const found = await row<{ n: number }>(
    `select coalesce(sum(stored), 0)::int as n from step where campaign_id = $1 and kind = 'measure' and role <> 'find'`,
    [campaignId],
  );
  return found?.n ?? 0;
}

const reaches = (run: Run, repeats: number) => expect.poll(() => stored(run), { timeout: 60_000, interval: 20 }).toBeGreaterThanOrEqual(repeats);

async function finishes({ campaignId, stateFolder }: Run): Promise<void> {
  const state = async () => (await row<{ state: string }>(`select state from campaign where id = $1`, [campaignId]))?.state;
  try {
    await expect.poll(state, { timeout: 120_000, interval: 100 }).toBe("finished");
  } catch (error) {
    console.error(fs.readFileSync(logOf(stateFolder), "utf8").slice(-4000));
    throw error;
  }
}

/** Everything that was measured, and what was made of it: by (sequence, index), and by phase. */
async function outcome({ campaignId }: Run) {
  const readings = await rows(
    `select s.sequence, s.medium, r.idx, r.taken_at as "takenAt", encode(r.content_hash, 'hex') as content, r.flags, f.f0_hz as "f0Hz", f.q, f.flags as "fitFlags"
       from reading r join step s on s.id = r.step_id left join fit f on f.step_id = r.step_id and f.idx = r.idx
      where s.campaign_id = $1 and s.role <> 'find' order by s.sequence, r.idx`,
    [campaignId],
  );
  const phases = await rows(
    `select p.sequence, p.cycle, p.medium, p.role, s.n, s.n_used as "nUsed", s.f0_mean as "f0Mean", s.f0_u as "f0U", s.q_mean as "qMean"
       from phase p join phase_summary s on s.phase_id = p.id where p.campaign_id = $1 order by p.sequence`,
    [campaignId],
  );
  return { readings, phases };
}

it("web, worker and simulator killed in mid-campaign and started again: it finishes with every repeat exactly once, as if undisturbed", { timeout: 300_000 }, async () => {
  const calm = await prepare("calm");
  const undisturbed = simulate(calm);
  await finishes(calm);
  await strike(undisturbed);

  const rough = await prepare("rough");
  let simulator = simulate(rough);
  const pids = () => Object.fromEntries(Object.entries(childrenOf(dataDirectory)).map(([name, { pid }]) => [name, pid]));

  await reaches(rough, 0.1 * TOTAL);
  const first = pids();
  kill("web");
  await cameBack("web", first.web);
  await reaches(rough, 0.3 * TOTAL);
  kill("worker");
  await cameBack("worker", first.worker);
  await reaches(rough, 0.5 * TOTAL);
  await strike(simulator);
  simulator = simulate(rough);
  await reaches(rough, 0.7 * TOTAL);
  const second = pids();
  kill("web");
  kill("worker");
  await strike(simulator);
  expect(await stored(rough)).toBeLessThan(TOTAL);
  simulator = simulate(rough);
  await cameBack("web", second.web);
  await cameBack("worker", second.worker);
  await finishes(rough);
  await strike(simulator);

  const expected = await outcome(calm);
  expect(expected.readings).toHaveLength(TOTAL);
  expect(await outcome(rough)).toEqual(expected);
});
