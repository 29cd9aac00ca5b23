import { describe, expect, test } from "vitest";
import { confidenceBand } from "@/lib/numerics/stability/confidence";
import { deviation, type Statistic } from "@/lib/numerics/stability/deviation";
import { edf } from "@/lib/numerics/stability/edf";
import type { Alpha } from "@/lib/numerics/stability/power-law";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { totalBias } from "@/lib/numerics/stability/total-bias";
import reference from "@/tests/reference/1-frequency-stability/confidence-intervals.json";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";
import { relativeError } from "@/tests/numerics/relative-error";

/** NIST SP 1065 (2008) Table 32: overlapping Allan deviation of the 1000-point set, m = 10. */
describe("SP 1065 Table 32", () => {
  const { oadev, edf_computed, exact, published } = reference.example;
  const band = confidenceBand({ deviation: oadev, edf: edf_computed, confidence: 0.95 });

  test("exact limits", () => {
    expect(relativeError(band.lower, exact.double_sided_95.min)).toBeLessThan(1e-6);
    expect(relativeError(band.upper, exact.double_sided_95.max)).toBeLessThan(1e-6);
    const sigma = confidenceBand({ deviation: oadev, edf: edf_computed, confidence: 0.682689492 });
    expect(relativeError(sigma.lower, exact.one_sigma_68_27.min)).toBeLessThan(1e-6);
    expect(relativeError(sigma.upper, exact.one_sigma_68_27.max)).toBeLessThan(1e-6);
  });
  test("printed limits, whose chi-squared values are rounded", () => {
    expect(relativeError(band.lower, published.double_sided_95.min)).toBeLessThan(1e-3);
    expect(relativeError(band.upper, published.double_sided_95.max)).toBeLessThan(1e-3);
  });
});

test("impossible confidence is an error", () => {
  expect(() => confidenceBand({ deviation: 1, edf: 3, confidence: 1 })).toThrow(RangeError);
  expect(() => confidenceBand({ deviation: 1, edf: 0, confidence: 0.9 })).toThrow(RangeError);
});

const full = process.env.LONGREED_FULL === "1";
const runs = full ? 4000 : 600;
const length = full ? 512 : 96;
const factors = full ? [1, 2, 4, 8, 16, 32, 64] : [1, 2, 8];
const confidence = 0.683;
/** Three standard errors of a share over the runs, beside what is promised. */
const chance = 300 * Math.sqrt((confidence * (1 - confidence)) / runs);

/** True deviation by factor: the mean variance of many more series than are judged with it. */
function trueDeviations(statistic: Statistic, alpha: Alpha): Map<number, number> {
  const make = powerLawNoise({ alpha, length, seed: 90_001 });
  const sums = new Map(factors.map((m) => [m, 0]));
  for (let run = 0; run < 5 * runs; run++) {
    const y = make();
    for (const [m, sum] of sums) sums.set(m, sum + (unbiasedDeviation(statistic, { y, alpha, m }) ?? 0) ** 2);
  }
  return new Map([...sums].map(([m, sum]) => [m, Math.sqrt(sum / (5 * runs))]));
}

function unbiasedDeviation(
  statistic: Statistic,
  { y, alpha, m }: { y: Float64Array; alpha: Alpha; m: number },
): number | undefined {
  const bias = statistic === "totdev" ? totalBias({ lengths: [length], alpha, m }) : 1;
  const found = deviation(statistic, [y], m);
  return found && found.deviation / Math.sqrt(bias);
}

describe("bands hold the truth at their rate, noise type known, ± 3 points", () => {
  const cases: { statistic: Statistic; alpha: Alpha }[] = [
    { statistic: "oadev", alpha: 2 },
    { statistic: "oadev", alpha: 1 },
    { statistic: "oadev", alpha: 0 },
    { statistic: "oadev", alpha: -1 },
    { statistic: "oadev", alpha: -2 },
    { statistic: "mdev", alpha: 0 },
    { statistic: "ohdev", alpha: -1 },
    { statistic: "totdev", alpha: 0 },
    { statistic: "totdev", alpha: -2 },
    { statistic: "adev", alpha: -2 },
    { statistic: "tdev", alpha: 1 },
    { statistic: "hdev", alpha: 0 },
  ];

  test.each(cases)("$statistic, α = $alpha", { timeout: 300_000 }, ({ statistic, alpha }) => {
    const truths = trueDeviations(statistic, alpha);
    const judged = factors.filter((m) => edf(statistic, { lengths: [length], alpha, m }) >= 5);
    expect(judged.length).toBeGreaterThan(1);
    const held = new Map(judged.map((m) => [m, 0]));
    const make = powerLawNoise({ alpha, length, seed: 4_117 });
    for (let run = 0; run < runs; run++) {
      const y = make();
      for (const m of judged) {
        const found = unbiasedDeviation(statistic, { y, alpha, m }) ?? NaN;
        const degrees = edf(statistic, { lengths: [length], alpha, m });
        const { lower, upper } = confidenceBand({ deviation: found, edf: degrees, confidence });
        const truth = truths.get(m) ?? NaN;
        if (lower <= truth && truth <= upper) held.set(m, (held.get(m) ?? 0) + 1);
      }
    }
    for (const [m, count] of held) {
      const off = (100 * count) / runs - 100 * confidence;
      expect(Math.abs(off), `m = ${m}: ${off.toFixed(1)} points off`).toBeLessThan(3 + chance);
    }
  });
});

describe("bands of the curve, noise type identified, ± 6 points", () => {
  test.each([2, 1, 0, -1, -2] as const)("overlapping Allan, α = %i", { timeout: 300_000 }, (alpha) => {
    const truths = trueDeviations("oadev", alpha);
    const make = powerLawNoise({ alpha, length, seed: 52_013 });
    const held = new Map<number, { held: number; judged: number }>();
    for (let run = 0; run < runs; run++) {
      const series = { stretches: [make()], tau0S: 1 };
      const { points } = stabilityCurve({ ...series, statistic: "oadev", taus: "octave", confidence, minEdf: 5 });
      for (const { m, lower, upper } of points) {
        const truth = truths.get(m);
        if (truth === undefined) continue;
        const at = held.get(m) ?? { held: 0, judged: 0 };
        held.set(m, { held: at.held + (lower <= truth && truth <= upper ? 1 : 0), judged: at.judged + 1 });
      }
    }
    expect(held.size).toBeGreaterThan(1);
    for (const [m, at] of held) {
      if (at.judged < runs / 2) continue; // a point that a wrong type lets in now and then
      const off = (100 * at.held) / at.judged - 100 * confidence;
      expect(Math.abs(off), `m = ${m}: ${off.toFixed(1)} points off`).toBeLessThan(6 + chance);
    }
  });
});
