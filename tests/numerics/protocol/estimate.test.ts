import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { estimate } from "@/lib/protocol/estimate";
import type { World } from "@/lib/protocol/made-up-world";
import type { Definition, DefinitionInput } from "@/lib/protocol/schema";
import { anyDefinition, define, drain, dry, fill, measure, settle, sweep } from "./definitions";

type Blocks = DefinitionInput["blocks"];

const startMs = Date.UTC(2026, 2, 10, 9);
const world: World = {
  nowMs: startMs,
  timeZone: "UTC",
  abilities: { minHz: 100, maxHz: 100_000, maxPoints: 4001, maxDriveV: 1 },
  nominal: { f0Hz: 8000, q: 500 },
};
const turn: Blocks = [measure("air"), fill("a"), measure("a", { repeats: 10 }), drain, dry];
const turns = (times: number) => define([{ kind: "repeat", times, blocks: turn }]);

describe("what a protocol needs", () => {
  test("is counted step by step where it is short", () => {
    expect(estimate(turns(3), world)).toMatchObject({
      steps: 15,
      repeats: 42,
      phases: 6,
      cycles: 3,
      mlPerSlot: { a: 120 },
      wasteMl: 120,
      isExact: true,
      perCycle: { phases: 2, repeats: 14 },
    });
  });

  test("takes what the protocol says: sweeps, flow, drying, waiting", () => {
    const { seconds } = estimate(define([measure("air", { pauseS: 10 }), fill("a"), dry, { kind: "wait", seconds: 1000 }]), world);
    // 4 × 61 × 0.1 s + 3 × 10 s, 40 mL at 20 mL/min = 120 s, 600 s, 1000 s.
    const least = 4 * 61 * 0.1 + 30 + 120 + 600 + 1000;
    expect(seconds.low).toBeGreaterThan(least);
    expect(seconds.low).toBeLessThan(least + 10);
    expect(seconds.low).toBeLessThan(seconds.likely);
    expect(seconds.likely).toBeLessThan(seconds.high);
  });

  test("counts what is rinsed with, the bottles, and how often a person is asked", () => {
    const definition = define([
      {
        kind: "repeat",
        times: 50,
        blocks: [fill("a"), drain, { kind: "rinse", slot: "s", volumeMl: 5, times: 2 }, dry, { kind: "ask", instruction: "Wipe it", urgency: "low" }],
      },
    ]);
    expect(estimate(definition, world)).toMatchObject({
      mlPerSlot: { a: 2000, s: 500 },
      wasteMl: 2500,
      people: { asks: 50, bottles: { a: 2, s: 1 } },
    });
  });

  test("reckons with cleaning that works at once, at the second turn, or at the last", () => {
    const clean: Blocks[number] = {
      kind: "untilClean",
      blocks: [{ kind: "rinse", slot: "s", volumeMl: 10, times: 1 }, dry],
      measure: measure("air"),
      tolerancePpm: 10,
      maxTimes: 5,
      otherwise: "hold",
    };
    const { mlPerSlot, atMost, seconds } = estimate(define([measure("air"), clean]), world);
    expect(mlPerSlot).toEqual({ s: 20 });
    expect(atMost).toEqual({ mlPerSlot: { s: 50 }, wasteMl: 50 });
    expect(seconds.high).toBeGreaterThan(5 * 600);
    expect(seconds.low).toBeLessThan(2 * 600);
  });

  test("includes the searches, once in each medium and at each temperature, and leaves their repeats out", () => {
    const definition = define([
      { kind: "forEach", over: { temperaturesC: [20, 30] }, blocks: [settle("each"), { kind: "repeat", times: 3, blocks: [measure("air", { sweep }), fill("a"), measure("a", { sweep }), drain] }] },
    ]);
    expect(estimate(definition, world)).toMatchObject({ steps: 2 + 2 * 3 * 4 + 2 * 2, repeats: 2 * 3 * 8, cycles: 6 });
  });
});

describe("long loops", () => {
  test("of equal turns come out exactly, however many", () => {
    const many = estimate(turns(2_000_000), world);
    expect(many).toMatchObject({ steps: 10_000_000, repeats: 28_000_000, phases: 4_000_000, cycles: 2_000_000, wasteMl: 80_000_000, isExact: false });
    expect(many.seconds.likely / estimate(turns(100), world).seconds.likely).toBeCloseTo(20_000, 6);
  });

  test("within each other, too", () => {
    const nested = (times: number) => define([{ kind: "repeat", times, blocks: [dry, { kind: "repeat", times, blocks: [drain, { kind: "repeat", times, blocks: [measure("air")] }] }] }]);
    expect(estimate(nested(300), world)).toMatchObject({ steps: 300 + 300 ** 2 + 300 ** 3, cycles: 300, isExact: false });
  });

  test("multiplied agree with any protocol gone through turn by turn but for its length", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs, depth: 3 }), (inner) => {
        const wrapped = (times: number): Definition => ({ ...inner, blocks: [{ id: "all", kind: "repeat", times, blocks: inner.blocks }] });
        fc.pre(!JSON.stringify(inner).includes('"until"'));
        const [ten, eleven, many] = [10, 11, 40_000].map((times) => estimate(wrapped(times), world));
        fc.pre(ten.isExact && eleven.isExact);
        expect(many.steps).toBe(ten.steps + (eleven.steps - ten.steps) * (40_000 - 10));
        expect(many.wasteMl).toBeCloseTo(ten.wasteMl + (eleven.wasteMl - ten.wasteMl) * (40_000 - 10), 3);
      }),
      { numRuns: 10 },
    );
  }, 30_000);

  test("up to a date have as many turns as begin before it ends", () => {
    const hourly: Blocks = [{ kind: "wait", seconds: 3599 }, drain];
    const until = (date: string) => estimate(define([{ kind: "repeat", until: date, blocks: hourly }]), world);
    const short = until("2026-03-11");
    const long = until("2028-03-09");
    expect(short.isExact).toBe(true);
    expect(long.isExact).toBe(false);
    const endS = (Date.UTC(2028, 2, 10) - startMs) / 1000;
    for (const key of ["low", "likely", "high"] as const) {
      expect(long.seconds[key]).toBeGreaterThanOrEqual(endS);
      expect(long.seconds[key]).toBeLessThan(endS + 4000);
    }
    expect(long.cycles).toBe(Math.ceil(long.seconds.likely / (short.seconds.likely / short.cycles) - 1e-6));
  });

  test("that wait for a time of day last a day each", () => {
    const { seconds } = estimate(define([{ kind: "repeat", times: 3000, blocks: [{ kind: "wait", until: { time: "08:00" } }, measure("air")] }]), world);
    expect(seconds.likely / 86_400).toBeCloseTo(3000, 0);
  });

  test("over long lists within each other end", () => {
    const slots = Array.from({ length: 100 }, (_, index) => `s${index}`);
    let blocks: Blocks = [fill("each"), drain];
    for (let depth = 0; depth < 6; depth++) blocks = [{ kind: "forEach", over: { slots }, blocks }];
    expect(estimate(define(blocks), world).steps).toBe(2 * 100 ** 6);
  }, 30_000);
});
