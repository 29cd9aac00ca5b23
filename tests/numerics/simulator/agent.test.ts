import { afterEach, describe, expect, it } from "vitest";
import { badNetwork } from "@/rig-simulator/agent/bad-network";
import { runAgent } from "@/rig-simulator/agent/run-agent";
import { httpTransport } from "@/rig-simulator/agent/transport";
import type { Sleep } from "@/rig-simulator/clock";
import type { MeasureStep, Reading } from "@/rig-simulator/contract";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { scenarioSchema, type Scenario } from "@/rig-simulator/scenario";
import { ContractServer } from "./contract-server";

const clockStartMs = Date.parse("2026-03-02T06:00:00Z");
const sweep = { startHz: 2395, stopHz: 2405, points: 51, dwellS: 1.5, driveV: 0.5 };

const measure = (repeats: number, params: Partial<MeasureStep["params"]> = {}) => ({
  kind: "measure" as const,
  params: { medium: "air", repeats, pauseS: 2, sweep, ...params },
});
const fill = { kind: "fill" as const, params: { port: 1, volumeMl: 20, flowMlPerMin: 10 } };
const drain = { kind: "drain" as const, params: {} };
const rinse = { kind: "rinse" as const, params: { port: 2, volumeMl: 10, times: 3 } };
const dry = { kind: "dry" as const, params: { seconds: 600 } };
const settle = { kind: "settle" as const, params: { temperatureC: 25, toleranceC: 0.02, holdS: 300, timeoutS: 7200 } };

/** Quick is the scenario's text with parts replaced. */
const scenario = (faults: object = {}, more: object = {}): Scenario => scenarioSchema.parse({ ...loadScenario("quick"), faults, ...more });

/** A rig that must tell how far it came, since nothing may be repeated. */
const unrepeatable = { rig: { ...loadScenario("quick").rig, repeatable: [] } };

/** Pauses of real time are not waited for: the turn of the event loop is enough. */
const noWait: Sleep = (_, signal) =>
  new Promise((resolve, reject) => setImmediate(() => (signal?.aborted ? reject(signal.reason as Error) : resolve())));

const servers: ContractServer[] = [];
afterEach(async () => {
  await Promise.all(servers.splice(0).map((server) => server.stop()));
});

async function run(server: ContractServer, rigOrScenario: Rig | Scenario, options: { seed?: number; until?: AbortSignal } = {}) {
  const url = await server.start();
  servers.push(server);
  const rig =
    rigOrScenario instanceof Rig
      ? rigOrScenario
      : new Rig({ scenario: rigOrScenario, seed: options.seed ?? 7, speed: { kind: "fast" }, store: memoryStore(), clockStartMs });
  const log: string[] = [];
  // The heartbeat's timer stays real (30 s): only pauses shorter than that are skipped.
  const slept: number[] = [];
  const sleep: Sleep = (ms, signal) => {
    slept.push(ms);
    return ms >= 30_000 ? new Promise((_, reject) => signal?.addEventListener("abort", () => reject(signal.reason as Error))) : noWait(ms, signal);
  };
  await runAgent({
    rig,
    transport: badNetwork(httpTransport({ url, token: "t" }), rig, sleep),
    instance: "i",
    signal: options.until ?? AbortSignal.timeout(20_000),
    untilIdle: true,
    log: (text) => log.push(text),
    sleep,
  });
  return { rig, log, slept };
}

const plan = () => [measure(30), fill, measure(20, { liquid: { slot: "water", port: 1, name: "Water" }, medium: "water", sweep: { ...sweep, startHz: 2000, stopHz: 2500, dwellS: 0.1 } }), drain, rinse, dry, measure(30)];

describe("the agent", () => {
  it("does step after step and stores every repeat once", async () => {
    const server = new ContractServer(plan());
    const { rig } = await run(server, scenario());
    expect(server.finishes.map(({ outcome }) => outcome)).toEqual(Array(7).fill("done"));
    expect(server.stored(1)).toHaveLength(30);
    expect(server.stored(3)).toHaveLength(20);
    expect(rig.world.ports).toEqual({ 1: 1980, 2: 1970 });
    expect(rig.world.wasteMl).toBe(50);
  });

  it("tells in heartbeats how warm it is, and what is in the bottles where the rig has level sensors", async () => {
    const beats = async (levelSensors: boolean) => {
      const server = new ContractServer([fill, drain, rinse]);
      const { rig } = loadScenario("quick");
      await run(server, scenario({}, { rig: { ...rig, levelSensors } }));
      return server.calls.filter(({ path }) => path.endsWith("/heartbeat")).map(({ body }) => body);
    };
    expect((await beats(true)).at(-1)).toMatchObject({ temperatureC: 20, ports: [{ port: 1, volumeMl: 1980 }, { port: 2, volumeMl: 1970 }], wasteMl: 50 });
    expect((await beats(false)).every((body) => !("ports" in body) && !("wasteMl" in body))).toBe(true);
  });

  it("keeps time by the work done in fast mode", async () => {
    const server = new ContractServer([measure(3), dry, measure(2)]);
    await run(server, scenario());
    const times = [...server.stored(1), ...server.stored(3)].map(({ takenAt }) => (Date.parse(takenAt) - clockStartMs) / 1000);
    const periodS = 51 * 1.5 + 2;
    expect(times).toEqual([0, periodS, 2 * periodS, 3 * periodS + 600, 4 * periodS + 600]);
  });

  it("jumps to the date that a wait is for", async () => {
    const server = new ContractServer([measure(1), { ...measure(1), dueAt: "2026-03-09T06:00:00Z" }]);
    await run(server, scenario());
    expect(server.stored(2)[0].takenAt).toBe("2026-03-09T06:00:00.000Z");
  });

  it("splits batches by the server's limits", async () => {
    const server = new ContractServer([measure(40)]);
    server.limits = { maxReadings: 15, maxBodyBytes: 9000 };
    await run(server, scenario());
    const batches = server.calls.filter(({ path }) => path.endsWith("/readings"));
    expect(server.stored(1)).toHaveLength(40);
    for (const { body } of batches) expect(JSON.stringify(body).length).toBeLessThanOrEqual(9000);
    expect(Math.max(...batches.map(({ body }) => (body.readings as unknown[]).length))).toBeGreaterThan(1);
  });

  it("goes on after a crash with what the server lacks, and the readings are the same byte for byte", async () => {
    const whole = new ContractServer(plan());
    await run(whole, scenario());
    const disturbed = new ContractServer(plan());
    disturbed.limits = { maxReadings: 4, maxBodyBytes: 1e6 };
    const { log } = await run(disturbed, scenario({ crashes: [{ sequence: 1, index: 11 }, { kind: "fill" }, { sequence: 7, index: 2 }] }));
    expect(log.filter((text) => text.startsWith("crash"))).toHaveLength(3);
    expect(disturbed.calls.filter(({ path }) => path.endsWith("/hello"))).toHaveLength(4);
    expect(Object.fromEntries(disturbed.readings)).toEqual(Object.fromEntries(whole.readings));
  });

  it("fills only the rest after a crash in mid-filling", async () => {
    const server = new ContractServer([fill]);
    const { rig } = await run(server, scenario({ crashes: [{ kind: "fill" }] }, unrepeatable));
    const told = server.calls.filter(({ path, body }) => path.endsWith("/heartbeat") && body.done).map(({ body }) => body.done);
    expect(told).toEqual([{ volumeMl: 0 }, { volumeMl: 10 }, { volumeMl: 10 }, { volumeMl: 15 }, { volumeMl: 20 }, { volumeMl: 20 }]);
    expect(rig.world.ports[1]).toBe(1980);
  });

  it("measures exactly the ranges named as missing", async () => {
    const server = new ContractServer([measure(12)]);
    const full = new ContractServer([measure(12)]);
    await run(full, scenario());
    for (const index of [0, 1, 2, 5, 9]) server.readings.set(`1/${index}`, full.stored(1)[index]);
    server.steps[0].attempts = 1;
    await run(server, scenario());
    const sent = server.calls.filter(({ path }) => path.endsWith("/readings")).flatMap(({ body }) => (body.readings as { index: number }[]).map(({ index }) => index));
    expect(sent).toEqual([3, 4, 6, 7, 8, 10, 11]);
  });

  it("ends a phase as interrupted on hold, keeps its readings and goes on later", async () => {
    const server = new ContractServer([measure(300)]);
    let released = false;
    server.meddle = ({ path }) => {
      if (path.endsWith("/readings") && !released) server.wish = "hold";
      if (path.endsWith("/next") && server.finishes.length === 1) {
        server.wish = "none";
        released = true;
      }
      return undefined;
    };
    await run(server, scenario());
    expect(server.finishes.map(({ outcome }) => outcome)).toEqual(["interrupted", "done"]);
    expect(server.stored(1)).toHaveLength(300);
  });

  it("runs a filling to its end on hold, but not a drying", async () => {
    for (const [step, outcome] of [[fill, "done"], [dry, "interrupted"]] as const) {
      const server = new ContractServer([step]);
      server.meddle = ({ path }) => {
        if (path.endsWith("/heartbeat") && server.steps[0].state === "out") server.wish = "hold";
        return undefined;
      };
      await run(server, scenario({}, unrepeatable));
      expect(server.finishes[0].outcome).toBe(outcome);
    }
  });

  it("asks again when the lease is lost", async () => {
    const server = new ContractServer([measure(10), measure(5)]);
    let lost = false;
    server.meddle = ({ path }) => {
      if (!path.endsWith("/1/finish") || lost) return undefined;
      lost = true;
      return { status: 409, body: { type: "/problems/lease-lost", detail: "given out again" } };
    };
    await run(server, scenario());
    expect(server.finishes).toHaveLength(2);
    expect(server.stored(2)).toHaveLength(5);
  });

  it("leaves a step that was given out again while it uploads", async () => {
    const server = new ContractServer([measure(250)]);
    let taken = false;
    server.meddle = ({ path }) => {
      if (path.endsWith("/readings") && !taken) {
        taken = true;
        server.steps[0].leases.push("somebody else's");
      }
      return undefined;
    };
    await run(server, scenario());
    expect(server.stored(1)).toHaveLength(250);
    expect(server.finishes.map(({ outcome }) => outcome)).toEqual(["done"]);
  });

  it("waits as long as a 503 or 429 says and then sends the same", async () => {
    const server = new ContractServer([measure(5)]);
    const refused = new Map<string, number>();
    server.meddle = ({ path }) => {
      const times = (refused.get(path) ?? 0) + 1;
      refused.set(path, times);
      return times <= 2 && !path.endsWith("/heartbeat") ? { status: times === 1 ? 503 : 429, headers: { "retry-after": "2" } } : undefined;
    };
    const { slept } = await run(server, scenario());
    expect(server.stored(1)).toHaveLength(5);
    expect(server.finishes).toHaveLength(1);
    expect(slept.filter((ms) => ms === 2000)).toHaveLength(2 * refused.size - 2);
  });

  it("reports the pump's failure as often as the scenario says", async () => {
    const server = new ContractServer([fill, measure(1)]);
    const { log } = await run(server, scenario({ pump: [{ sequence: 1, times: 2, retry: true }] }));
    expect(server.finishes.map(({ failure, outcome }) => failure?.code ?? outcome)).toEqual(["pump", "pump", "done", "done"]);
    expect(log.some((text) => text.includes("pump"))).toBe(true);
  });

  it("says when a bottle is empty and finds it full when the step comes again", async () => {
    const big = { ...fill, params: { port: 1, volumeMl: 1500 } };
    const server = new ContractServer([big, drain, big]);
    const { rig } = await run(server, scenario());
    expect(server.finishes.map(({ failure, outcome }) => failure?.code ?? outcome)).toEqual(["done", "done", "port-empty", "done"]);
    expect(rig.world.ports[1]).toBe(500);
  });

  it("fails a settling that takes longer than it may", async () => {
    const server = new ContractServer([{ ...settle, params: { ...settle.params, timeoutS: 60 } }]);
    server.meddle = ({ path }) => (path.endsWith("/next") && server.finishes.length > 0 ? { status: 204 } : undefined);
    await run(server, scenario());
    expect(server.finishes[0].failure?.code).toBe("timeout");
  });

  it("refuses a sweep beyond the rig's range without another try", async () => {
    const server = new ContractServer([measure(1, { sweep: { ...sweep, stopHz: 90_000 } })]);
    await run(server, scenario());
    expect(server.finishes).toEqual([{ sequence: 1, outcome: "failed", failure: expect.objectContaining({ code: "instrument", retry: false }) as unknown }]);
  });

  it("gives the same readings over a network that drops, repeats and reorders", async () => {
    const steps = () => [settle, ...plan()];
    const calm = new ContractServer(steps());
    await run(calm, scenario());
    const rough = new ContractServer(steps());
    rough.limits = { maxReadings: 5, maxBodyBytes: 1e6 };
    const network = { dropRequest: 0.15, dropAnswer: 0.15, duplicate: 0.1, reorder: 0.1, delay: 0.1 };
    await run(rough, scenario({ network, crashes: [{ sequence: 4, index: 9 }] }));
    expect(Object.fromEntries(rough.readings)).toEqual(Object.fromEntries(calm.readings));
    expect(rough.steps.every(({ state }) => state === "done")).toBe(true);
  });

  it("spools through hours without network", async () => {
    const server = new ContractServer([measure(200), measure(10)]);
    const { rig } = await run(server, scenario({ offline: [{ fromHours: 1, hours: 2 }] }));
    expect(server.stored(1)).toHaveLength(200);
    expect(server.stored(2)).toHaveLength(10);
    expect(rig.clock.nowMs() - clockStartMs).toBe(210 * (51 * 1.5 + 2) * 1000);
  });

  const atSpeed = (factor: number) => new Rig({ scenario: scenario(), seed: 7, speed: { kind: "times", factor }, store: memoryStore(), clockStartMs });

  it("takes its time at ×N: repeats are at least a period of rig time apart, and the readings are those of fast mode", async () => {
    const server = new ContractServer([measure(4)]);
    await run(server, atSpeed(50_000));
    const times = server.stored(1).map(({ takenAt }) => Date.parse(takenAt));
    for (let i = 1; i < 4; i++) expect(times[i] - times[i - 1]).toBeGreaterThanOrEqual((51 * 1.5 + 2) * 1000 - 1000);
    const fast = new ContractServer([measure(4)]);
    await run(fast, scenario());
    const timeless = (reading: Reading) => ({ ...reading, takenAt: "" });
    expect(server.stored(1).map(timeless)).toEqual(fast.stored(1).map(timeless));
  });

  it("leaves a drying at once on hold, however long it would still take", async () => {
    const server = new ContractServer([{ ...dry, params: { seconds: 86_400 } }]);
    server.meddle = ({ path }) => {
      if (path.endsWith("/heartbeat") && server.steps[0].state === "out") server.wish = "hold";
      return undefined;
    };
    await run(server, atSpeed(10));
    expect(server.finishes).toMatchObject([{ outcome: "interrupted" }]);
  });

  it("stops for good when the server does not know the token", async () => {
    const server = new ContractServer([measure(1)]);
    server.meddle = () => ({ status: 401, body: { type: "/problems/unauthorised", detail: "unknown token" } });
    await expect(run(server, scenario())).rejects.toThrow("401");
  });

  it("tells a clock that is off by the scenario's offset", async () => {
    const server = new ContractServer([measure(1)]);
    await run(server, scenario({ clockOffsetS: 90 }));
    expect(Date.parse(server.stored(1)[0].takenAt) - clockStartMs).toBe(90_000);
    expect(server.calls[0].body.clock).toBe("2026-03-02T06:01:30.000Z");
  });
});
