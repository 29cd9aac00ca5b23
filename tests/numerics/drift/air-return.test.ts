import { describe, expect, test } from "vitest";
import { judgeAirReturn, type AirReturn } from "@/lib/numerics/drift/air-return";
import type { AirReferences, Before } from "@/lib/numerics/drift/air-references";
import { airPhase, scenarioWith } from "@/tests/numerics/temperature/simulated-air";
import { gaussian } from "@/tests/numerics/seeded-noise";

const full = process.env.LONGREED_FULL === "1";
const seeds = Array.from({ length: full ? 60 : 10 }, (_, i) => i + 1);
const noise = { f0WhitePpm: 0.5, f0FlickerPpm: 0.05, f0WalkPpmPerRootDay: 0.03, qWhitePercent: 0.05, qFlickerPercent: 0.01 };
const surroundings = { pressureSwingPa: 0, humiditySwingPercent: 0, dryingCoolsC: 0, leak: 0 };

/** One reference a cycle; after the cycles named, cleaned again with three more rinses and measured once more. */
function simulated(changes: object, { seed, cycles = 30, cleanAgainAfter = [] }: { seed: number; cycles?: number; cleanAgainAfter?: readonly number[] }): AirReferences {
  const scenario = scenarioWith({ noise, surroundings, changes, pace: { hoursPerStep: 6 } });
  const taken: { atDays: number; f0Hz: number; q: number; before: Before }[] = [];
  for (let cycle = 0; cycle < cycles; cycle++) {
    const sequence = 1 + 4 * cycle;
    taken.push({ ...airPhase(scenario, { sequence, seed, cycle }).phase, before: "clean" });
    if (cleanAgainAfter.includes(cycle)) taken.push({ ...airPhase(scenario, { sequence: sequence + 1, seed, cycle, rinses: 6 }).phase, before: "cleanAgain" });
  }
  const [f0, q] = [taken[0].f0Hz, taken[0].q];
  return {
    atDays: Float64Array.from(taken, ({ atDays }) => atDays),
    f0Ppm: Float64Array.from(taken, ({ f0Hz }) => (f0Hz / f0 - 1) * 1e6),
    qPercent: Float64Array.from(taken, (one) => (one.q / q - 1) * 100),
    before: taken.map(({ before }) => before),
    baselineQ: q,
  };
}

const residue = { residue: { fromCycle: 0, f0PpmPerCycle: -1.2, qPercentPerCycle: -0.1 } };
const verdicts = (changes: object, more: Omit<Parameters<typeof simulated>[1], "seed"> = {}) =>
  seeds.map((seed) => judgeAirReturn(simulated(changes, { ...more, seed })));
const share = (found: readonly AirReturn[], verdict: AirReturn["verdict"]) => found.filter((one) => one.verdict === verdict).length / found.length;

describe("what the simulator did to the sensor is named", { timeout: 300_000 }, () => {
  test("nothing", () => {
    const found = verdicts({});
    expect(share(found, "none")).toBeGreaterThanOrEqual(0.9);
    for (const kind of ["residue", "ageing", "step"] as const) expect(share(found, kind)).toBeLessThanOrEqual(0.1);
  });

  test("residue that damps, without cleaning again", () => {
    const found = verdicts(residue);
    expect(share(found, "residue")).toBeGreaterThanOrEqual(0.9);
    for (const { growth, cleanedAgain } of found) {
      expect(growth?.q).toBe("falls");
      expect(cleanedAgain.takesOff).toBe("untried");
      expect(Math.abs((growth?.f0PpmPerDay ?? NaN) - -1.2)).toBeLessThan(0.2);
    }
  });

  test("residue without loss, by what cleaning again takes off", () => {
    const rigid = { residue: { ...residue.residue, qPercentPerCycle: 0 } };
    const found = verdicts(rigid, { cleanAgainAfter: [14, 22, 28] });
    expect(share(found, "residue")).toBeGreaterThanOrEqual(0.9);
    for (const { cleanedAgain } of found) {
      expect(cleanedAgain).toMatchObject({ times: 3, takesOff: "yes" });
      expect(Math.abs(cleanedAgain.share - (1 - 0.6 ** 3))).toBeLessThan(0.25);
    }
  });

  test("ageing, which stays when cleaned again and leaves Q alone", () => {
    const found = verdicts({ creep: [{ fromCycle: 0, f0PpmPerCycle: -1.2 }] }, { cleanAgainAfter: [14, 22, 28] });
    expect(share(found, "ageing")).toBeGreaterThanOrEqual(0.9);
    for (const { cleanedAgain } of found) expect(cleanedAgain.takesOff).toBe("no");
  });

  test("a slip of the clamp, with its size in f0 and Q", () => {
    const found = verdicts({ slips: [{ fromCycle: 15, f0Ppm: -46, qPercent: -0.6 }] });
    expect(share(found, "step")).toBe(1);
    expect(found.filter(({ steps }) => steps.length === 1).length / found.length).toBeGreaterThanOrEqual(0.85);
    for (const { steps } of found) {
      const slip = steps.find(({ index }) => index === 15);
      expect(Math.abs((slip?.f0Ppm ?? NaN) + 46)).toBeLessThan(4 * (slip?.f0U ?? NaN));
      expect(Math.abs((slip?.qPercent ?? NaN) + 0.6)).toBeLessThan(4 * (slip?.qU ?? NaN));
    }
  });

  test("a slip in the midst of residue: both are seen", () => {
    const found = verdicts({ ...residue, slips: [{ fromCycle: 15, f0Ppm: -60, qPercent: -0.2 }] });
    const of = (holds: (one: AirReturn) => boolean) => found.filter(holds).length / found.length;
    expect(of(({ steps }) => steps.some(({ index }) => index === 15))).toBe(1);
    expect(of(({ growth }) => growth?.kind === "residue")).toBeGreaterThanOrEqual(0.85);
    expect(share(found, "step")).toBeGreaterThanOrEqual(0.95);
  });
});

const n = 24;
function made(of: { f0: (i: number) => number; q?: (i: number) => number; before?: (i: number) => Before; qNoise?: number; seed?: number }): AirReferences {
  const next = gaussian(of.seed ?? 3);
  return {
    atDays: Float64Array.from({ length: n }, (_, i) => i),
    f0Ppm: Float64Array.from({ length: n }, (_, i) => of.f0(i) + 0.2 * next()),
    qPercent: Float64Array.from({ length: n }, (_, i) => (of.q?.(i) ?? 0) + (of.qNoise ?? 0.005) * next()),
    before: Array.from({ length: n }, (_, i) => of.before?.(i) ?? "clean"),
    baselineQ: 2000,
  };
}

describe("honestly undecided", () => {
  test("growth downwards whose Q is lost in noise, never cleaned again", () => {
    expect(judgeAirReturn(made({ f0: (i) => -i, qNoise: 5 }))).toMatchObject({ verdict: "undecided", growth: { q: "unclear" } });
  });
  test("Q falls as with residue, yet cleaning again takes nothing off", () => {
    const found = judgeAirReturn(made({ f0: (i) => -i, q: (i) => -0.1 * i, before: (i) => (i % 6 === 5 ? "cleanAgain" : "clean") }));
    expect(found).toMatchObject({ verdict: "undecided", growth: { q: "falls" }, cleanedAgain: { takesOff: "no" } });
  });
  test("f0 rises with damping: no residue adds stiffness", () => {
    expect(judgeAirReturn(made({ f0: (i) => i, q: (i) => -0.1 * i })).verdict).toBe("undecided");
  });
  test("a clean-again lost in the noise is called unclear", () => {
    const found = judgeAirReturn(made({ f0: () => 0, before: (i) => (i === 20 ? "cleanAgain" : "clean") }));
    expect(found.cleanedAgain).toMatchObject({ times: 1, takesOff: "unclear" });
  });
});

test("growth without loss is ageing when Q is known well enough", () => {
  expect(judgeAirReturn(made({ f0: (i) => 0.8 * i }))).toMatchObject({ verdict: "ageing", growth: { q: "quiet" } });
});

test("a slowing growth is ageing by its shape where Q tells nothing", () => {
  const found = judgeAirReturn(made({ f0: (i) => -20 * Math.log1p(i), qNoise: 5 }));
  expect(found.growth?.logarithmic).toBeLessThan(-6);
  expect(found.verdict).toBe("ageing");
});

test("loss factor of what grew: (dQ/Q)/(2 Q df0/f0)", () => {
  const { growth } = judgeAirReturn(made({ f0: (i) => -2 * i, q: (i) => -0.08 * i }));
  expect(Math.abs((growth?.lossFactor ?? NaN) - 0.0008 / (2 * 2000 * 2e-6))).toBeLessThan(4 * (growth?.lossFactorU ?? NaN));
});

test("a jump at a re-mount is neither step nor growth", () => {
  const found = judgeAirReturn(made({ f0: (i) => (i >= 12 ? 300 : 0), before: (i) => (i === 12 ? "remount" : "clean") }));
  expect(found).toMatchObject({ verdict: "none", steps: [] });
});

test("a long record with a re-mount where its second stretch would begin", () => {
  const many = 320;
  const next = gaussian(12);
  const found = judgeAirReturn({
    atDays: Float64Array.from({ length: many }, (_, i) => i),
    f0Ppm: Float64Array.from({ length: many }, (_, i) => (i >= 160 ? -40 : 0) + next()),
    qPercent: Float64Array.from({ length: many }, () => 0.01 * next()),
    before: Array.from({ length: many }, (_, i) => (i === 160 ? "remount" : "clean")),
    baselineQ: 2000,
  });
  expect(found).toMatchObject({ verdict: "none", steps: [], n: many });
});

test("too few references and bad input", () => {
  const short = made({ f0: () => 0 });
  const cut = { ...short, atDays: short.atDays.subarray(0, 9), f0Ppm: short.f0Ppm.subarray(0, 9), qPercent: short.qPercent.subarray(0, 9), before: short.before.slice(0, 9) };
  expect(judgeAirReturn(cut)).toMatchObject({ verdict: "too few", n: 9 });
  expect(judgeAirReturn({ atDays: new Float64Array(0), f0Ppm: new Float64Array(0), qPercent: new Float64Array(0), before: [], baselineQ: 1 }).verdict).toBe("too few");
  expect(() => judgeAirReturn({ ...short, baselineQ: 0 })).toThrow(RangeError);
  expect(() => judgeAirReturn({ ...short, before: [] })).toThrow(RangeError);
  expect(() => judgeAirReturn({ ...short, f0Ppm: short.f0Ppm.with(3, NaN) })).toThrow(RangeError);
  expect(() => judgeAirReturn({ ...short, atDays: short.atDays.with(3, 1) })).toThrow(RangeError);
});
