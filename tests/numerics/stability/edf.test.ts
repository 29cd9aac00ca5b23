import { describe, expect, test } from "vitest";
import type { Statistic } from "@/lib/numerics/stability/deviation";
import { discreteEdf } from "@/lib/numerics/stability/discrete-edf";
import { edf } from "@/lib/numerics/stability/edf";
import { greenhallRileyEdf } from "@/lib/numerics/stability/greenhall-riley-edf";
import type { Alpha } from "@/lib/numerics/stability/power-law";
import { statisticShapes, termsIn } from "@/lib/numerics/stability/statistic-shape";
import { referenceTable, referenceText } from "@/tests/numerics/reference-table";
import { relativeError } from "@/tests/numerics/relative-error";

/** Greenhall and Riley (35th PTTI, 2003), evaluated for 1001 phase points by two independent programs. */
describe("combined algorithm of Greenhall and Riley", () => {
  const rows = referenceText("1-frequency-stability/edf-greenhall-riley-check.csv");

  test.each(rows)("$statistic, α = $alpha, m = $m", (row) => {
    const [alpha, m] = [Number(row.alpha) as Alpha, Number(row.m)];
    const found = greenhallRileyEdf(statisticShapes[row.statistic as Statistic], { alpha, m })(1000);
    expect(relativeError(found, Number(row.edf))).toBeLessThan(1e-6);
  });

  test("random run noise has no Allan variance", () => {
    expect(() => greenhallRileyEdf(statisticShapes.oadev, { alpha: -4, m: 1 })).toThrow(RangeError);
  });
});

/** trace(C)²/trace(C²) of the exact covariance C of overlapped second differences. */
describe("exact degrees of freedom of discrete noise", () => {
  const rows = referenceTable("1-frequency-stability/edf-exact-oadev.csv");

  test.each(rows.filter(({ m }) => m <= 33))("overlapping Allan, N = $N_phase, α = $alpha, m = $m", (row) => {
    const found = discreteEdf(statisticShapes.oadev, { alpha: row.alpha as Alpha, m: row.m })(row.N_phase - 1);
    expect(relativeError(found, row.edf_exact)).toBeLessThan(1e-6);
  });

  test.each(rows)("the curve's edf is within 2 % of exact, N = $N_phase, α = $alpha, m = $m", (row) => {
    const found = edf("oadev", { lengths: [row.N_phase - 1], alpha: row.alpha as Alpha, m: row.m });
    expect(relativeError(found, row.edf_exact)).toBeLessThan(0.02);
  });
});

describe("pooling over stretches", () => {
  test("two equal stretches have twice the degrees of freedom of one", () => {
    const one = edf("oadev", { lengths: [64], alpha: 0, m: 2 });
    expect(edf("oadev", { lengths: [64, 64], alpha: 0, m: 2 })).toBeCloseTo(2 * one, 9);
  });

  test("(Σn)²/Σ(n²/edf) for unequal stretches", () => {
    const [a, b] = [100, 30].map((length) => edf("oadev", { lengths: [length], alpha: -2, m: 4 }));
    const [n, k] = [93, 23];
    expect(edf("oadev", { lengths: [100, 30], alpha: -2, m: 4 })).toBeCloseTo((n + k) ** 2 / (n ** 2 / a + k ** 2 / b), 9);
  });

  test("stretches too short for a term change nothing", () => {
    expect(edf("oadev", { lengths: [100, 7], alpha: 0, m: 4 })).toBe(edf("oadev", { lengths: [100], alpha: 0, m: 4 }));
    expect(edf("oadev", { lengths: [7], alpha: 0, m: 4 })).toBeNaN();
  });
});

/** NIST SP 1065 (2008) Table 7. */
describe("total deviation", () => {
  test.each([
    [0, 1.5 * 10],
    [-1, 1.17 * 10 - 0.22],
    [-2, 0.93 * 10 - 0.36],
  ] as const)("edf = b T/τ − c, α = %i", (alpha, expected) => {
    expect(edf("totdev", { lengths: [1000], alpha, m: 100 })).toBeCloseTo(expected, 12);
  });

  test("at short averaging times it promises no more than there are terms", () => {
    for (const alpha of [2, 1, 0, -1, -2] as const) expect(edf("totdev", { lengths: [200], alpha, m: 1 })).toBeLessThan(199);
  });
});

describe.each(Object.keys(statisticShapes) as Statistic[])("%s at every length, factor and noise", (statistic) => {
  const exponents = [2, 1, 0, -1, -2, -3, -4] as const;
  const possible = exponents.filter((alpha) => alpha >= -2 || statisticShapes[statistic].differences === 3);

  test.each(possible)("α = %i: at least one, at most the number of terms, never rising with the factor", (alpha) => {
    for (const length of [3, 10, 40, 101, 250, 999, 5000]) {
      let before = Infinity;
      for (let m = 1; termsIn(statistic, length, m) > 0; m = Math.max(m + 1, Math.floor(1.1 * m))) {
        const found = edf(statistic, { lengths: [length], alpha, m });
        expect(found).toBeGreaterThan(0.99);
        expect(found).toBeLessThanOrEqual(Math.max(termsIn(statistic, length, m), 1.14) * (1 + 1e-9));
        expect(found).toBeLessThan(before * 1.002);
        before = found;
      }
    }
  });
});
