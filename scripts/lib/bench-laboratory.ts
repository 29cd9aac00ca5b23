import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { createCampaign } from "@/lib/campaigns/create";
import { queueCampaign } from "@/lib/campaigns/queue";
import { sequelize } from "@/lib/db";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import { createFirstAdministrator } from "@/lib/people/create-administrator";
import { createProtocol } from "@/lib/protocols/create";
import { createRig } from "@/lib/rigs/create";
import { createAgentToken } from "@/lib/rigs/tokens";
import { createSensor } from "@/lib/sensors/create";
import { migrate } from "@/scripts/migrate";
import { ensureBuild } from "./build.mjs";
import { openDataDirectory } from "./data-directory.mjs";
import { demoEnvironment } from "./demo-environment.mjs";
import { freePort } from "./ports.mjs";
import { ensureDatabase, startPostgres } from "./postgres.mjs";
import { waitForAnswer, webService, workerService } from "./services.mjs";
import { type Service, supervise } from "./supervise.mjs";

export type Step = { id: string; kind: string; lease: string; params: { repeats: number; sweep: { startHz: number; stopHz: number; points: number } } };

type Given = { repeats: number; points: number; rigs?: number };

/** PostgreSQL, web and worker in a folder of their own, and rigs with a campaign each of nothing but air. */
export async function startBenchLaboratory({ rigs = 1, ...given }: Given, later: (undo: () => Promise<void> | void) => void): Promise<{ url: string; tokens: string[]; pids: ReadonlyMap<string, number> }> {
  const root = path.resolve(import.meta.dirname, "../..");
  const distDir = process.env.LONGREED_DIST_DIR ?? ".next";
  await ensureBuild({ root, distDir, step: (_title, work) => work() });
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
  const pids = new Map<string, number>();
  const start = (service: Service) =>
    later(supervise(service, { root, logDirectory: data.logDirectory, notice: (line) => console.error(line), onStart: (name, pid) => pids.set(name, pid) }).stop);
  start(webService({ root, env, port: ports.web, distDir }));
  start(workerService({ root, env }));
  const url = `http://127.0.0.1:${ports.web}`;
  const tokens = await makeCampaigns(given, rigs);
  await waitForAnswer(`${url}/sign-in`, { withinMs: 60_000 });
  return { url, tokens, pids };
}

async function makeCampaigns({ repeats, points }: Given, rigs: number): Promise<string[]> {
  const now = new Date();
  const person = await createFirstAdministrator({ email: "bench@longreed.example", name: "Bench", password: "of no use elsewhere", now });
  const by = { id: person.id, name: person.name, role: person.role };
  const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points, dwell: { s: 0.01 }, driveV: 0.1 };
  const { versionId } = await createProtocol({
    by,
    now,
    definition: {
      name: `Air, ${repeats} repeats`,
      readout: "velocity",
      blocks: [{ kind: "repeat", times: 1000, blocks: [{ kind: "measure", medium: "air", repeats, sweep }] }],
      limits: [
        { kind: "return", tolerancePpm: 1000, does: ["mail"] },
        { kind: "drift", quantity: "f0", ppmPerDay: 1e6, does: ["mail"] },
        { kind: "fit", sharePercent: 50, does: ["mail"] },
      ],
    },
  });
  const tokens: string[] = [];
  for (let i = 1; i <= rigs; i++) {
    const { id: rigId } = await createRig({ by, now, name: `Bench ${i}`, timeZone: "UTC", ports: 1 });
    const { token } = await createAgentToken({ by, now, rigId, name: "bench" });
    const { id: sensorId } = await createSensor({ by, now, serial: `BENCH-${i}`, kind: "wire", nominalF0Hz: 2400, nominalQ: 2000 });
    await mountSensor({ by, now, sensorId, rigId });
    const { id: campaignId } = await createCampaign({ by, now, protocolVersionId: versionId, sensorId, rigId, slots: {} });
    await queueCampaign({ by, now, campaignId });
    tokens.push(token);
  }
  return tokens;
}

export type BenchAgent = (path: string, body: object) => Promise<unknown>;

export function benchAgent(url: string, token: string): BenchAgent {
  return async (path, body) => {
    const headers = { authorization: `Bearer ${token}`, "content-type": "application/json" };
    const answer = await fetch(`${url}/api/agent/${path}`, { method: "POST", headers, body: JSON.stringify(body) });
    if (!answer.ok) throw new Error(`${path}: ${answer.status} ${await answer.text()}`);
    return answer.status === 204 ? undefined : answer.json();
  };
}

export async function nextStep(agent: BenchAgent): Promise<Step> {
  const step = (await agent("steps/next", { waitS: 20 })) as Step | undefined;
  if (!step) throw new Error("no step came within 20 s");
  return step;
}

export const hello = (agent: BenchAgent): Promise<unknown> =>
  agent("hello", {
    agent: { name: "bench", version: "1", instance: "bench" },
    clock: new Date().toISOString(),
    abilities: { minHz: 100, maxHz: 20_000, maxPoints: 2001, maxDriveV: 1, ports: 1, kinds: ["measure"] },
  });
