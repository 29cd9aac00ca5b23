import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { row, rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import type { Definition } from "@/lib/protocol/schema";
import { newToken } from "@/lib/tokens";
import { AgentToken } from "@/models/agent-token";
import { badNetwork } from "@/rig-simulator/agent/bad-network";
import { runAgent } from "@/rig-simulator/agent/run-agent";
import { httpTransport } from "@/rig-simulator/agent/transport";
import { sleep } from "@/rig-simulator/clock";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { nominalInAir } from "@/rig-simulator/physics/truth";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { scenarioSchema } from "@/rig-simulator/scenario";
import { buildCampaign } from "../../factories/campaign";
import { buildMount } from "../../factories/mount";
import { now } from "../../factories/now";
import { aDefinition, buildProtocolVersion } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";
import { serveAgentRoutes } from "./agent-routes";

let server: Awaited<ReturnType<typeof serveAgentRoutes>>;
let stopFastPath: () => Promise<void>;
const errors: unknown[] = [];

beforeAll(async () => {
  server = await serveAgentRoutes();
  stopFastPath = await startFastPath({ onError: (_, error) => errors.push(error), onMail: async () => {}, onRefit: async () => {}, onImport: async () => {}, onAdvanced: async () => {} });
});
afterAll(async () => {
  await server.stop();
  await stopFastPath();
  await listener().close();
  await sequelize.close();
});

const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5.2 }, driveV: 0.5 };
const blocks: Definition["blocks"] = [
  {
    id: "cycles",
    kind: "repeat",
    times: 3,
    blocks: [
      { id: "morning", kind: "wait", until: { time: "06:00" } },
      { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 30, discard: 0, pauseS: 2, sweep },
      { id: "fill", kind: "fill", slot: "sample", volumeMl: 20, flowMlPerMin: 10 },
      { id: "liquid", kind: "measure", medium: "sample", role: "sample", repeats: 20, discard: 0, pauseS: 2, sweep },
      { id: "drain", kind: "drain" },
      { id: "rinse", kind: "rinse", slot: "sample", volumeMl: 10, times: 3 },
      { id: "dry", kind: "dry", seconds: 900 },
    ],
  },
];

type Stored = {
  sequence: number;
  medium: string;
  idx: number;
  takenAt: Date;
  /** Digest of everything that was uploaded. */
  content: string;
  flags: number;
  f0Hz: number | null;
  q: number | null;
  fitFlags: number | null;
};

/** A whole campaign on a rig of its own, and what was stored of it. */
async function runCampaign(faults: object): Promise<{ state: string; readings: Stored[] }> {
  const scenario = scenarioSchema.parse({ ...loadScenario("quick"), changes: {}, faults });
  const { f0Hz, q } = nominalInAir(scenario);
  const rig = await buildRig({ clock: "simulated" });
  const sensor = await buildSensor({ nominalF0Hz: f0Hz, nominalQ: q });
  const { token, hash, last4 } = newToken("agent");
  await AgentToken.create({ rigId: rig.id, name: "simulator", tokenHash: hash, last4, createdAt: now });
  const version = await buildProtocolVersion({ definition: aDefinition({ blocks }) });
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const campaign = await buildCampaign({ rigId: rig.id, sensorId: sensor.id, protocolVersionId: version.id, state: "queued" });

  const simulated = new Rig({ scenario, seed: 5, speed: { kind: "fast" }, store: memoryStore(), clockStartMs: Date.parse("2026-01-05T03:00:00Z") });
  const ending = new AbortController();
  await runAgent({
    rig: simulated,
    transport: badNetwork(httpTransport({ url: server.url, token }), simulated, sleep),
    instance: "simulator",
    signal: AbortSignal.any([ending.signal, AbortSignal.timeout(60_000)]),
    untilIdle: true,
    log: () => undefined,
  });

  const readings = await rows<Stored>(
    `select s.sequence, s.medium, r.idx, r.taken_at as "takenAt", encode(r.content_hash, 'hex') as content, r.flags, f.f0_hz as "f0Hz", f.q, f.flags as "fitFlags"
       from reading r join step s on s.id = r.step_id left join fit f on f.step_id = r.step_id and f.idx = r.idx
      where s.campaign_id = $1 and s.role <> 'find' order by s.sequence, r.idx`,
    [campaign.id],
  );
  const { state = "gone" } = (await row<{ state: string }>(`select state from campaign where id = $1`, [campaign.id])) ?? {};
  return { state, readings };
}

describe("a simulated rig on the application's own routes", () => {
  it("brings a campaign with waits to its end, every repeat once, and the same again with crashes on a bad network", { timeout: 120_000 }, async () => {
    const calm = await runCampaign({});
    expect(calm.state).toBe("finished");
    expect(calm.readings.filter(({ medium }) => medium === "air")).toHaveLength(90);
    expect(calm.readings.filter(({ medium }) => medium === "sample")).toHaveLength(60);
    expect(calm.readings.every(({ flags, fitFlags, f0Hz }) => flags === 0 && fitFlags === 0 && f0Hz !== null)).toBe(true);
    const days = new Set(calm.readings.filter(({ medium, idx }) => medium === "air" && idx === 0).map(({ takenAt }) => takenAt.toISOString().slice(0, 10)));
    expect(days.size).toBe(3);

    const rough = await runCampaign({
      crashes: [{ sequence: 4, index: 7 }, { kind: "fill" }, { sequence: 10, index: 3 }],
      network: { dropRequest: 0.05, dropAnswer: 0.05, duplicate: 0.05, reorder: 0.05 },
    });
    expect(rough.state).toBe("finished");
    expect(rough.readings).toEqual(calm.readings);
    expect(errors).toEqual([]);
  });
});
