import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { row, rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import type { Definition } from "@/lib/protocol/schema";
import { runAgent } from "@/rig-simulator/agent/run-agent";
import { httpTransport, NoAnswer, type Request, type Transport } from "@/rig-simulator/agent/transport";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { serveAgentRoutes } from "./agent-routes";
import { hasty, operator, restless, runCampaign, sweep, type Disturbance, type Left, type Place } from "./run-campaign";

let server: Awaited<ReturnType<typeof serveAgentRoutes>>;
let stopFastPath: () => Promise<void>;
let calm: Left;
const errors: unknown[] = [];

beforeAll(async () => {
  server = await serveAgentRoutes();
  stopFastPath = await startFastPath({ onError: (key, error) => errors.push([key, error]), onMail: async () => {}, onRefit: async () => {}, onImport: async () => {}, onAdvanced: async () => {} });
  calm = await runCampaign(server.url);
});
afterAll(async () => {
  await server.stop();
  await stopFastPath();
  await listener().close();
  await sequelize.close();
});

test("undisturbed: every repeat once, its alarm raised", () => {
  expect(calm.state).toBe("finished");
  expect(calm.phases).toHaveLength(6);
  expect(calm.phases).toMatchObject([12, 10, 12, 10, 12, 10].map((n) => ({ n })));
  expect(calm.readings.filter((reading) => "role" in reading && reading.role !== "find")).toHaveLength(66);
  expect(calm.alarms).toMatchObject([{ limit_id: "back", kind: "return" }]);
});

let campaignId = "";
const remember = (person?: Disturbance["person"]) => async (place: Place) => {
  campaignId = place.campaignId;
  await person?.(place);
};

async function endsTheSame({ person, ...disturbance }: Disturbance): Promise<void> {
  const disturbed = await runCampaign(server.url, { ...disturbance, person: remember(person) });
  expect(disturbed).toEqual(calm);
  expect(errors).toEqual([]);
}

const tasks = () => rows<{ kind: string; state: string }>(`select kind, state from operator_task where campaign_id = $1 order by id`, [campaignId]);
const FILL_ML = 20;

/** A heartbeat that tells how far a fill is; the last one, with the whole volume, goes before the finish and tells nothing new. */
function isProgress({ path, body }: Request): boolean {
  if (!path.endsWith("/heartbeat")) return false;
  const { done } = JSON.parse(body) as { done?: { volumeMl?: number } };
  return done?.volumeMl !== undefined && done.volumeMl < FILL_ML;
}

describe("a disturbed run ends as the undisturbed one", { timeout: 90_000 }, () => {
  test("requests and answers dropped, delayed, doubled and in the wrong order", async () => {
    await endsTheSame({ faults: { network: { dropRequest: 0.08, dropAnswer: 0.08, duplicate: 0.1, reorder: 0.1, delay: 0.05, delayMs: 20 } }, rig: { repeatable: ["fill", "rinse", "drain", "dry"] } });
  });

  test("the agent's memory lost in the middle of measuring, filling, rinsing, draining and drying", async () => {
    const crashes = [{ sequence: 3, index: 5 }, { kind: "fill" }, { kind: "rinse" }, { kind: "drain" }, { kind: "dry" }, { cycle: 2, index: 4 }, { cycle: 3, index: 0 }];
    await endsTheSame({ faults: { crashes }, rig: { repeatable: [] } });
    expect(await tasks()).toEqual([]);
  });

  test("a fill lost without a word: somebody looks, and it is pumped once more only then", async () => {
    const deaf = (inner: Transport): Transport => async (request) => {
      if (isProgress(request)) throw new NoAnswer("heartbeat lost");
      return inner(request);
    };
    await endsTheSame({ faults: { crashes: [{ cycle: 2, kind: "fill" }] }, rig: { repeatable: [] }, network: deaf, person: operator });
    expect(await tasks()).toEqual([{ kind: "look", state: "answered" }]);
  });

  test("hours without network: the spool arrives after the step was given out again to a restarted program", async () => {
    let usurped = false;
    const usurping = (inner: Transport, { url, token }: Place): Transport => async (request) => {
      try {
        return await inner(request);
      } catch (error) {
        if (!usurped && request.path.endsWith("/readings") && error instanceof NoAnswer) {
          usurped = true;
          await askInstead(url, token);
        }
        throw error;
      }
    };
    await endsTheSame({ faults: { offline: [{ fromHours: 26.1, hours: 6 }] }, network: usurping });
    expect(usurped).toBe(true);
    expect(await row(`select max(attempt) as attempt from step where campaign_id = $1 and kind = 'measure'`, [campaignId])).not.toEqual({ attempt: 1 });
  });

  test("bottles that run empty, replaced by another lot, by an operator who answers twice", async () => {
    const ports = [{ port: 1, name: "Water", liquid: { model: "water" }, volumeMl: 60 }, { port: 2, name: "2-Propanol", liquid: { model: "2-propanol" }, volumeMl: 60 }];
    await endsTheSame({ rig: { ports }, person: operator });
    expect((await tasks()).map(({ kind, state }) => `${kind} ${state}`)).toContain("load answered");
    const loads = await rows(`select distinct load_id from step where campaign_id = $1 and load_id is not null`, [campaignId]);
    expect(loads.length).toBeGreaterThan(1);
  });

  test("a waste container that is full", async () => {
    await endsTheSame({ rig: { wasteCapacityMl: 60 }, person: operator });
    expect((await tasks()).map(({ kind, state }) => `${kind} ${state}`)).toContain("waste answered");
  });

  test("a pump that fails, first so that it can be tried again, then for good until a person lets it go on", async () => {
    const pump = [{ cycle: 1, kind: "fill", times: 2, retry: true }, { cycle: 2, kind: "rinse", times: 1, retry: false }, { cycle: 3, kind: "drain", times: 3, retry: true }];
    await endsTheSame({ faults: { pump }, person: operator });
    expect(await rows(`select id from hold where campaign_id = $1 and reason = 'failure'`, [campaignId])).toHaveLength(2);
  });

  test("a person who pauses and goes on again and again", async () => {
    await endsTheSame({ beside: restless });
    expect((await rows(`select id from hold where campaign_id = $1 and reason = 'person'`, [campaignId])).length).toBeGreaterThan(0);
  });

  test("two programs with one token: one drives, the other is told so", async () => {
    const told: string[] = [];
    await endsTheSame({
      beside: async ({ url, token, simulated, rigId }, signal) => {
        while (!(await row(`select id from agent_session where rig_id = $1`, [rigId]))) await hasty(1, signal);
        await runAgent({
          rig: new Rig({ scenario: simulated.scenario, seed: 6, speed: { kind: "fast" }, store: memoryStore(), clockStartMs: simulated.clock.nowMs() }),
          transport: httpTransport({ url, token }),
          instance: "another",
          signal,
          log: (text) => told.push(text),
          sleep: hasty,
        });
      },
    });
    expect(told.some((text) => text.includes("other-agent"))).toBe(true);
  });
});

describe("what goes wrong at the rig itself", { timeout: 90_000 }, () => {
  const badNetwork = { network: { dropRequest: 0.05, dropAnswer: 0.05, duplicate: 0.1, reorder: 0.1, delay: 0.05, delayMs: 20 } };

  test("a bubble on the wire: seen in the repeats that it was there for, and the same on a bad network with a lost memory", async () => {
    const scenario = { changes: { bubbles: [{ cycle: 2, repeats: 3, share: 0.05 }] } };
    const quiet = await runCampaign(server.url, { scenario });
    const inLiquid = (quiet.readings as { medium: string; cycle: number; idx: number; f0_hz: number }[]).filter(({ medium, cycle }) => medium === "sample" && cycle === 2);
    const mean = (list: { f0_hz: number }[]) => list.reduce((sum, { f0_hz }) => sum + f0_hz, 0) / list.length;
    const shift = mean(inLiquid.filter(({ idx }) => idx < 3)) / mean(inLiquid.filter(({ idx }) => idx >= 3)) - 1;
    // Less liquid moves with the wire, so it is faster.
    expect(shift).toBeGreaterThan(1e-3);
    expect(await runCampaign(server.url, { scenario, faults: { ...badNetwork, crashes: [{ cycle: 2, kind: "fill" }, { cycle: 2, index: 2 }] }, rig: { repeatable: ["fill", "rinse", "drain", "dry"] } })).toEqual(quiet);
  });

  test("a thermostat that does not come to temperature, tried again, then held until a person lets it go on", async () => {
    const protocol = [25, 30].flatMap((temperatureC, i): Definition["blocks"] => [
      { id: `bath-${i}`, kind: "settle", temperatureC, toleranceC: 0.05, holdS: 60, timeoutS: 36_000 },
      { id: `air-${i}`, kind: "measure", medium: "air", role: "reference", repeats: 8, discard: 0, pauseS: 2, sweep },
    ]);
    const quiet = await runCampaign(server.url, { protocol });
    expect(quiet).toMatchObject({ state: "finished", phases: [{ n: 8 }, { n: 8 }] });
    const thermostat = [{ sequence: 1, times: 1, retry: true }, { sequence: 4, times: 1, retry: false }];
    expect(await runCampaign(server.url, { protocol, faults: { thermostat }, person: remember(operator) })).toEqual(quiet);
    expect(await rows(`select id from hold where campaign_id = $1 and reason = 'failure'`, [campaignId])).toHaveLength(1);
  });

  test("a clock that is eight seconds ahead: people are told, and readings get the time at which they were taken", async () => {
    const protocol: Definition["blocks"] = [{ id: "air", kind: "measure", medium: "air", role: "reference", repeats: 6, discard: 0, pauseS: 0.4, sweep: { ...sweep, dwell: { s: 0.002 } } }];
    const quiet = await runCampaign(server.url, { protocol, clock: "real" });
    const off = await runCampaign(server.url, { protocol, clock: "real", faults: { clockOffsetS: 8 }, person: remember() });
    type Timed = { idx: number; role: string; taken_at: Date; at: Date; f0_hz: number; q: number };
    const values = ({ readings }: Left) => (readings as Timed[]).map(({ role, idx, f0_hz, q }) => ({ role, idx, f0_hz, q }));
    expect(values(off)).toEqual(values(quiet));
    for (const { taken_at, at } of off.readings as Timed[]) expect(taken_at.getTime() - at.getTime()).toBeCloseTo(8000, -3);
    for (const { taken_at, at } of quiet.readings as Timed[]) expect(Math.abs(taken_at.getTime() - at.getTime())).toBeLessThan(1000);
    const alarms = await rows<{ value: number }>(`select a.value from alarm a join campaign c on c.rig_id = a.rig_id where c.id = $1 and a.kind = 'clock'`, [campaignId]);
    expect(alarms).toHaveLength(1);
    expect(alarms[0].value).toBeCloseTo(8, 0);
  });
});

/** The same program, started anew beside the old one: it says hello, asks, and dies. */
async function askInstead(url: string, token: string): Promise<void> {
  const transport = httpTransport({ url, token });
  const { signal } = new AbortController();
  const abilities = { minHz: 100, maxHz: 20_000, maxPoints: 2001, maxDriveV: 1, ports: 2, kinds: ["measure", "fill", "drain", "rinse", "dry", "settle"] };
  const clock = "2026-01-05T03:00:00Z";
  const hello = await transport({ path: "/api/agent/hello", body: JSON.stringify({ agent: { name: "again", version: "1", instance: "simulator" }, clock, abilities }), signal });
  const { session } = hello.body as { session: string };
  const next = await transport({ path: "/api/agent/steps/next", body: JSON.stringify({ clock }), session, signal });
  expect(next.status).toBe(200);
}
