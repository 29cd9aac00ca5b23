import { describe, expect, test } from "vitest";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { withoutDeadTime } from "@/lib/numerics/stability/without-dead-time";
import { gaussian } from "@/tests/numerics/seeded-noise";

const curve = (stretches: Float64Array[], statistic: "oadev" | "mdev" = "oadev") =>
  stabilityCurve({ stretches, tau0S: 60, statistic, taus: "octave", confidence: 0.683, minEdf: 5 }).points;

/** Means over the first `measured` of every `spacing` fine values: repeats with a pause after each. */
function withPauses(fine: Float64Array, { measured, spacing }: { measured: number; spacing: number }): Float64Array {
  return Float64Array.from({ length: Math.floor(fine.length / spacing) }, (_, k) => {
    let sum = 0;
    for (let i = 0; i < measured; i++) sum += fine[k * spacing + i];
    return sum / measured;
  });
}

function fineNoise(alpha: 0 | -2, seed: number): Float64Array {
  const next = gaussian(seed);
  let level = 0;
  return Float64Array.from({ length: 40_000 }, () => (alpha === 0 ? next() : (level += next())));
}

/** NIST TN 1318: what a campaign with pauses shows, freed of them, is what one without pauses shows at the same averaging time. */
describe.each([0, -2] as const)("noise of exponent %i, measured a third of the time", (alpha) => {
  const shape = { measured: 8, spacing: 24 };
  const paused = Array.from({ length: 12 }, (_, seed) => withPauses(fineNoise(alpha, seed + 1), shape));
  const found = withoutDeadTime({ points: curve(paused), statistic: "oadev", tau0S: 60, repeatS: 20 });
  const unbroken = Array.from({ length: 12 }, (_, seed) => withPauses(fineNoise(alpha, seed + 101), { measured: 8, spacing: 8 }));
  const plain = stabilityCurve({ stretches: unbroken, tau0S: 20, statistic: "oadev", taus: "octave", confidence: 0.683 }).points;

  test("the dead time is stated", () => {
    expect(found.r).toBe(3);
    expect(found.deadShare).toBeCloseTo(2 / 3, 12);
    expect(found.treatment).toBe("corrected");
  });
  test("deviations agree with those without pauses", () => {
    const [short] = found.points;
    expect(short.tauS).toBe(20);
    for (const point of found.points.filter(({ edf }) => edf > 150)) {
      const same = plain.find(({ tauS }) => tauS === point.tauS);
      expect(Math.abs(point.deviation / (same?.deviation ?? NaN) - 1), `at ${point.tauS} s`).toBeLessThan(0.15);
      expect(point.lower).toBeLessThan(point.deviation);
      expect(point.upper).toBeGreaterThan(point.deviation);
    }
  });
  test("the size of the effect is stated", () => {
    if (alpha === 0) expect(found.largestEffect).toBeLessThan(0.01);
    else expect(found.largestEffect).toBeGreaterThan(0.5);
  });
});

test("no pauses, short ones, and a statistic without bias functions: points stand, said so", () => {
  const points = curve([fineNoise(0, 1)]);
  expect(withoutDeadTime({ points, statistic: "oadev", tau0S: 60, repeatS: 60 })).toMatchObject({ treatment: "none", r: 1, points });
  expect(withoutDeadTime({ points, statistic: "oadev", tau0S: 60, repeatS: 60.4 })).toMatchObject({ treatment: "none", r: 1 });
  expect(withoutDeadTime({ points, statistic: "oadev", tau0S: 60, repeatS: 59.5 })).toMatchObject({ treatment: "negligible", points });
  expect(withoutDeadTime({ points: curve([fineNoise(0, 1)], "mdev"), statistic: "mdev", tau0S: 60, repeatS: 20 }).treatment).toBe("not available");
  expect(() => withoutDeadTime({ points, statistic: "oadev", tau0S: 60, repeatS: 0 })).toThrow(RangeError);
});
