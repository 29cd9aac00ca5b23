import { describe, expect, test } from "vitest";
import {
  chiSquaredQuantile,
  fCdf,
  normalCdf,
  normalQuantile,
  studentTCdf,
  studentTQuantile,
} from "@/lib/numerics/statistics/distributions";
import { referenceTable } from "@/tests/numerics/reference-table";
import { relativeError } from "@/tests/numerics/relative-error";

/** JCGM 100:2008 Table G.2, to six decimals. */
describe("Student's t of the GUM", () => {
  const percents = ["68.27", "90", "95", "95.45", "99", "99.73"];
  const sigmas: Record<string, number> = { "68.27": 1, "95.45": 2, "99.73": 3 };

  test.each(referenceTable("5-metrology/student-t.csv"))("ν = $nu", (row) => {
    for (const percent of percents) {
      // The three sigma columns are for the exact probabilities of 1, 2 and 3 σ.
      const p = percent in sigmas ? normalCdf(sigmas[percent]) : (1 + Number(percent) / 100) / 2;
      expect(relativeError(studentTQuantile(p, row.nu), row[percent])).toBeLessThan(1e-6);
      expect(studentTCdf(row[percent], row.nu)).toBeCloseTo(p, 6);
    }
  });
});

/** Chi-squared quantiles as in standard tables, to seven figures. */
describe("chi-squared", () => {
  test.each(referenceTable("5-metrology/chi-squared.csv"))("ν = $nu", (row) => {
    for (const [p, value] of Object.entries(row)) {
      if (!Number.isFinite(Number(p))) continue;
      expect(relativeError(chiSquaredQuantile(Number(p), row.nu), value)).toBeLessThan(1e-6);
    }
  });
});

/** Computed with an independent library, beyond the range of printed tables. */
test.each([
  { dof: 1001, p: 0.00135, value: 872.0867611281974 },
  { dof: 1001, p: 0.975, value: 1090.574735898763 },
  { dof: 3000, p: 0.025, value: 2850.084936519793 },
  { dof: 3000, p: 0.5, value: 2999.3333596771927 },
  { dof: 1e6, p: 0.025, value: 997230.0871432901 },
  { dof: 1e6, p: 0.975, value: 1002773.701467926 },
])("chi-squared with $dof degrees of freedom at $p", ({ dof, p, value }) => {
  expect(relativeError(chiSquaredQuantile(p, dof), value)).toBeLessThan(1e-9);
});

test("F with 1 and ν degrees of freedom is the square of Student's t", () => {
  expect(fCdf(2.228138851964939 ** 2, { numerator: 1, denominator: 10 })).toBeCloseTo(0.95, 9); // GUM G.2: t95(10) = 2.23
});

test("normal quantile and distribution undo each other", () => {
  for (const p of [1e-9, 0.025, 0.5, 0.8413447460685429]) expect(normalCdf(normalQuantile(p))).toBeCloseTo(p, 12);
  expect(normalQuantile(0.8413447460685429)).toBeCloseTo(1, 12);
});

test("impossible probabilities and degrees of freedom are errors", () => {
  expect(() => chiSquaredQuantile(1.1, 3)).toThrow(RangeError);
  expect(() => studentTQuantile(0.5, 0)).toThrow(RangeError);
  expect(() => fCdf(1, { numerator: 1, denominator: NaN })).toThrow(RangeError);
});
