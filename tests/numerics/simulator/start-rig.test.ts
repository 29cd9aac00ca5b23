import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { createClock, parseSpeed } from "@/rig-simulator/clock";
import { runLaboratory } from "@/rig-simulator/laboratory";
import { loadScenario, parseScenario } from "@/rig-simulator/load-scenario";
import { startRig } from "@/rig-simulator/start-rig";
import { ContractServer } from "./contract-server";

let folder: string;
let server: ContractServer;
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), "rig-"));
});
afterEach(async () => {
  await server?.stop();
  rmSync(folder, { recursive: true });
});

const measure = (repeats: number) => ({
  kind: "measure" as const,
  params: { medium: "air", repeats, pauseS: 0, sweep: { startHz: 2395, stopHz: 2405, points: 21, dwellS: 1, driveV: 0.5 } },
});
const fill = { kind: "fill" as const, params: { port: 1, volumeMl: 20 } };
const entry = { token: "t", scenario: "quick", seed: 4, speed: "fast", clockStart: "2026-03-02T06:00:00Z" };

/** Runs until this many steps are finished, then ends the process's part as a kill would: nothing more is sent. */
async function runUntil(steps: number, url: string): Promise<void> {
  const ending = new AbortController();
  server.meddle = () => {
    if (server.finishes.length >= steps) ending.abort(new Error("killed"));
    return undefined;
  };
  await startRig({ ...entry, url }, { signal: AbortSignal.any([ending.signal, AbortSignal.timeout(20_000)]), stateFolder: folder, log: () => undefined });
}

describe("a rig that is started again", () => {
  it("has its clock and bottles where they were, and measures as if it had never been away", async () => {
    const plan = () => [measure(40), fill, measure(40), fill, measure(40)];
    server = new ContractServer(plan());
    await runUntil(5, await server.start());
    const whole = Object.fromEntries(server.readings);
    await server.stop();
    rmSync(folder, { recursive: true });

    server = new ContractServer(plan());
    const url = await server.start();
    await runUntil(2, url);
    await runUntil(5, url);
    expect(Object.fromEntries(server.readings)).toEqual(whole);
    const [state] = readdirSync(folder);
    expect(JSON.parse(readFileSync(path.join(folder, state), "utf8"))).toMatchObject({ ports: { 1: 1960, 2: 2000 } });
  });

  it("writes down the truth behind every reading on request", async () => {
    server = new ContractServer([measure(3)]);
    const url = await server.start();
    const truthFile = path.join(folder, "truth.jsonl");
    await startRig({ ...entry, url }, { signal: AbortSignal.timeout(20_000), untilIdle: true, truthFile, log: () => undefined });
    const lines = readFileSync(truthFile, "utf8").trim().split("\n").map((line) => JSON.parse(line) as Record<string, unknown>);
    expect(lines.map(({ sequence, index, takenAt }) => ({ sequence, index, takenAt }))).toEqual(
      server.stored(1).map(({ index, takenAt }) => ({ sequence: 1, index, takenAt })),
    );
    for (const { f0Hz, q } of lines) {
      expect(f0Hz).toBeCloseTo(2399.77, 0);
      expect(q).toBeGreaterThan(2000);
    }
  });

  it("keeps no token in its state", async () => {
    server = new ContractServer([measure(1)]);
    await runUntil(1, await server.start());
    expect(readdirSync(folder).join()).toMatch(/^[0-9a-f]{16}\.json$/);
  });
});

describe("the laboratory", () => {
  it("waits for its file, then runs every rig in it until it is ended", async () => {
    server = new ContractServer([measure(5)]);
    const url = await server.start();
    const file = path.join(folder, "rigs.json");
    const ending = new AbortController();
    server.meddle = () => {
      if (server.finishes.length === 1) ending.abort(new Error("enough"));
      return undefined;
    };
    const said: string[] = [];
    const log = (text: string) => {
      said.push(text);
      if (text.startsWith("waiting for")) writeFileSync(file, JSON.stringify([{ ...entry, url }]));
    };
    await runLaboratory({ file, signal: AbortSignal.any([ending.signal, AbortSignal.timeout(20_000)]), stateFolder: path.join(folder, "state"), log });
    expect(server.stored(1)).toHaveLength(5);
    expect(said).toContain(`waiting for ${file}`);
    expect(said).toContain("Test bench: connected as Rig");
  });

  it("says what is wrong with its file and goes on waiting", async () => {
    const file = path.join(folder, "rigs.json");
    writeFileSync(file, JSON.stringify([{ url: "not an address", token: "", scenario: "quick" }]));
    const ending = new AbortController();
    const said: string[] = [];
    await runLaboratory({
      file,
      signal: ending.signal,
      log: (text) => {
        said.push(text);
        ending.abort(new Error("enough"));
      },
    });
    expect(said[0]).toContain("is not a list of rigs");
    expect(said[0]).toContain("url");
  });
});

describe("speeds and scenarios", () => {
  it("are read as people write them", () => {
    expect(parseSpeed("real")).toEqual({ kind: "real" });
    expect(parseSpeed("fast")).toEqual({ kind: "fast" });
    for (const text of ["×60", "x60", "60"]) expect(parseSpeed(text)).toEqual({ kind: "times", factor: 60 });
    expect(parseSpeed("x1")).toEqual({ kind: "real" });
    for (const text of ["", "quick", "-3", "0", "x"]) expect(() => parseSpeed(text)).toThrow(/Speed must be/);
  });

  it("a clock at ×N runs N times as fast from where it began", async () => {
    const clock = createClock({ kind: "times", factor: 1000 }, 5_000_000);
    const before = performance.now();
    await clock.pass(20);
    const real = performance.now() - before;
    expect(real).toBeGreaterThan(15);
    expect(clock.nowMs() - 5_000_000).toBeGreaterThan(15_000);
  });

  it("that are unknown or wrong are refused in words", () => {
    expect(() => loadScenario("no-such-bench")).toThrow(/one of cold-room, north-bench, quick, south-bench/);
    expect(() => parseScenario("{", "a.json")).toThrow(/a\.json is not JSON/);
    expect(() => parseScenario('{"name":"x","colour":1}', "a.json")).toThrow(/is not a scenario[\s\S]*colour/);
  });
});
