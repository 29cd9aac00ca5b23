import { holdCampaign } from "@/lib/campaigns/hold";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { row, rows } from "@/lib/db";
import { listener } from "@/lib/listener";
import type { Definition } from "@/lib/protocol/schema";
import { recordLoad } from "@/lib/rigs/record-load";
import { answerTask } from "@/lib/tasks/answer";
import { newToken } from "@/lib/tokens";
import { AgentToken } from "@/models/agent-token";
import { badNetwork } from "@/rig-simulator/agent/bad-network";
import { runAgent } from "@/rig-simulator/agent/run-agent";
import { httpTransport, type Transport } from "@/rig-simulator/agent/transport";
import { sleep } from "@/rig-simulator/clock";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { nominalInAir } from "@/rig-simulator/physics/truth";
import { memoryStore, Rig, type TruthRecord } from "@/rig-simulator/rig";
import { scenarioSchema } from "@/rig-simulator/scenario";
import { buildCampaign } from "../../factories/campaign";
import { buildLot } from "../../factories/lot";
import { buildMount } from "../../factories/mount";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { aDefinition, buildProtocolVersion } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";

export const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5.2 }, driveV: 0.5 };
const blocks: Definition["blocks"] = [
  {
    id: "cycles",
    kind: "repeat",
    times: 3,
    blocks: [
      { id: "morning", kind: "wait", until: { time: "06:00" } },
      { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 12, discard: 1, pauseS: 2, sweep },
      { id: "fill", kind: "fill", slot: "sample", volumeMl: 20, flowMlPerMin: 10 },
      { id: "liquid", kind: "measure", medium: "sample", role: "sample", repeats: 10, discard: 0, pauseS: 2, sweep },
      { id: "drain", kind: "drain" },
      { id: "rinse", kind: "rinse", slot: "sample", volumeMl: 10, times: 3 },
      { id: "dry", kind: "dry", seconds: 900 },
    ],
  },
];
/** The wire slips by 200 ppm in cycle 3, so that there is an alarm to compare. */
const limits: Definition["limits"] = [{ id: "back", kind: "return", tolerancePpm: 60, does: ["mail"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }];
const changes = { slips: [{ fromCycle: 3, f0Ppm: -200 }] };

export type Place = { url: string; token: string; campaignId: string; rigId: string; simulated: Rig };

export type Disturbance = {
  faults?: object;
  /** Replaces parts of the scenario's rig, and of the scenario. */
  rig?: object;
  scenario?: object;
  readout?: Definition["readout"];
  /** In place of the three cycles of air and liquid. */
  protocol?: Definition["blocks"];
  /** `real`: rig and server keep the time of day, and measuring takes as long as it takes. */
  clock?: "simulated" | "real";
  /** Is told the truth behind every reading. */
  onTruth?: (record: TruthRecord) => void;
  /** Faults of the way to the server that the scenario does not know. */
  network?: (inner: Transport, place: Place) => Transport;
  /** What goes on beside the agent, until it ends or the signal does. */
  beside?: (place: Place, signal: AbortSignal) => Promise<void>;
  /** Called whenever something has changed, as a person would look at the screen. */
  person?: (place: Place) => Promise<void>;
};

/** What a campaign leaves behind, but for when it was received. */
export type Left = { state: string; readings: object[]; phases: object[]; alarms: object[] };

/** Runs a seeded campaign of three cycles on a rig of its own to its end. */
export async function runCampaign(
  url: string,
  { faults = {}, rig: part = {}, scenario: replaced = {}, readout = "velocity", protocol = blocks, clock = "simulated", onTruth, network = (inner) => inner, beside, person }: Disturbance = {},
): Promise<Left> {
  const quick = loadScenario("quick");
  const scenario = scenarioSchema.parse({ ...quick, rig: { ...quick.rig, ...part }, sensor: { ...quick.sensor, readout }, changes, faults, ...replaced });
  const { f0Hz, q } = nominalInAir(scenario);
  const rig = await buildRig({ clock });
  const sensor = await buildSensor({ nominalF0Hz: f0Hz, nominalQ: q });
  const { token, hash, last4 } = newToken("agent");
  await AgentToken.create({ rigId: rig.id, name: "simulator", tokenHash: hash, last4, createdAt: now });
  const version = await buildProtocolVersion({ definition: aDefinition({ blocks: protocol, limits, readout, baseline: { airReferences: 1 } }) });
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const campaign = await buildCampaign({ rigId: rig.id, sensorId: sensor.id, protocolVersionId: version.id, state: "queued" });

  const time = clock === "real" ? { speed: { kind: "real" as const } } : { speed: { kind: "fast" as const }, clockStartMs: Date.parse("2026-01-05T03:00:00Z") };
  const simulated = new Rig({ scenario, seed: 5, store: memoryStore(), onTruth, ...time });
  const place: Place = { url, token, campaignId: campaign.id, rigId: rig.id, simulated };
  const ending = new AbortController();
  const signal = AbortSignal.any([ending.signal, AbortSignal.timeout(60_000)]);
  const agent = runAgent({ rig: simulated, transport: network(badNetwork(httpTransport({ url, token }), simulated, sleep), place), instance: "simulator", signal, log: () => undefined, sleep: hasty });
  const alongside = beside?.(place, signal);
  try {
    while (!signal.aborted && (await stateOf(campaign.id)) !== "finished") {
      await person?.(place);
      await listener().wait(`changed:campaign:${campaign.id}`, 200, signal).catch(() => sleep(50));
    }
  } finally {
    ending.abort();
    await agent;
    await alongside?.catch((error: unknown) => {
      if (!signal.aborted) throw error;
    });
  }
  return left(campaign.id);
}

/** Pauses of the agent pass fifty times as fast: they are for people and computers, not for what is measured. */
export const hasty = (ms: number, signal?: AbortSignal): Promise<void> => sleep(Math.min(ms, 20 + ms / 50), signal);

/** While the database is away nobody can say. */
const stateOf = (campaignId: string) =>
  row<{ state: string }>(`select state from campaign where id = $1`, [campaignId]).then(
    (found) => found?.state,
    () => undefined,
  );

async function left(campaignId: string): Promise<Left> {
  return {
    state: (await stateOf(campaignId)) ?? "gone",
    readings: await rows(
      `select s.sequence, s.kind, s.role, s.medium, s.cycle, s.set_point_c, r.idx, r.taken_at, r.at, r.duration_s, r.temperature_c, r.pressure_pa, r.humidity_percent, r.kind,
              encode(r.content_hash, 'hex') as content, r.flags, f.f0_hz, f.q, f.f0_std_hz, f.q_std, f.amplitude_v, f.flags as fit_flags
         from reading r join step s on s.id = r.step_id left join fit f on f.step_id = r.step_id and f.idx = r.idx
        where s.campaign_id = $1 order by s.sequence, r.idx`,
      [campaignId],
    ),
    phases: await rows(
      `select p.sequence, p.cycle, p.medium, p.role, p.started_at, p.ended_at, s.n, s.n_used, s.f0_mean, s.f0_sd, s.f0_u, s.q_mean, s.q_u, s.temperature_mean, encode(s.columns, 'hex') as columns
         from phase p join phase_summary s on s.phase_id = p.id where p.campaign_id = $1 order by p.sequence`,
      [campaignId],
    ),
    alarms: await rows(
      `select a.limit_id, a.kind, a.value, a.limit_value, p.sequence from alarm a left join phase p on p.id = a.phase_id
        where a.campaign_id = $1 and a.source = 'limit' order by a.id`,
      [campaignId],
    ),
  };
}

/** An operator who does each errand at once, says so twice, and lets the campaign go on after a failure. */
export async function operator({ campaignId, rigId }: Place): Promise<void> {
  const tasks = await rows<{ id: string; kind: string; port: number | null }>(`select id, kind, port from operator_task where campaign_id = $1 and state = 'open'`, [campaignId]);
  const failed = await row(`select id from hold where campaign_id = $1 and reason = 'failure' and released_at is null`, [campaignId]);
  if (tasks.length === 0 && !failed) return;
  const by = await actor("operator");
  const at = new Date();
  for (const task of tasks) {
    if (task.kind === "load") {
      const standing = await row<{ liquidId: string }>(`select lot.liquid_id as "liquidId" from campaign_slot s join lot on lot.id = s.lot_id where s.campaign_id = $1 and s.port = $2`, [campaignId, task.port]);
      const lot = await buildLot({ liquidId: standing?.liquidId });
      await recordLoad({ by, now: at, rigId, port: task.port ?? 0, lotId: lot.id, volumeMl: 100, how: "replace", confirm: true });
    }
    for (let i = 0; i < 2; i++) await answerTask({ by, taskId: task.id, answer: "done", now: at });
  }
  if (failed) await resumeCampaign({ by, campaignId, from: "here", now: at });
}

/** Somebody pauses the campaign and lets it go on again, a few times. */
export async function restless({ campaignId }: Place, signal: AbortSignal): Promise<void> {
  const by = await actor("researcher");
  for (let i = 0; i < 4 && !signal.aborted; i++) {
    await listener().wait(`changed:campaign:${campaignId}`, 500, signal);
    if ((await stateOf(campaignId)) !== "running") continue;
    await holdCampaign({ by, campaignId, now: new Date() });
    await sleep(30, signal);
    await resumeCampaign({ by, campaignId, from: "here", now: new Date() });
  }
}
