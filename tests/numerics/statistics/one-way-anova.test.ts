import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { fCdf, studentTQuantile } from "@/lib/numerics/statistics/distributions";
import { effectiveDof } from "@/lib/numerics/statistics/effective-dof";
import { meanAndSd } from "@/lib/numerics/statistics/mean-and-sd";
import { oneWayAnova } from "@/lib/numerics/statistics/one-way-anova";
import atmwtag from "@/tests/reference/2-statistics/strd-anova-atmwtag.json";
import sirstv from "@/tests/reference/2-statistics/strd-anova-sirstv.json";
import smls01 from "@/tests/reference/2-statistics/strd-anova-smls01.json";
import smls04 from "@/tests/reference/2-statistics/strd-anova-smls04.json";
import smls07 from "@/tests/reference/2-statistics/strd-anova-smls07.json";
import univariate from "@/tests/reference/2-statistics/strd-univariate.json";
import gum from "@/tests/reference/5-metrology/gum-examples.json";
import iso5725 from "@/tests/reference/5-metrology/iso5725-example.json";
import { relativeError } from "@/tests/numerics/relative-error";

const groupsOf = (data: Record<string, number[]>) => Object.values(data).map((values) => Float64Array.from(values));

/** NIST/ITL Statistical Reference Datasets, analysis of variance. */
describe.each([
  { name: "SiRstv", set: sirstv, tolerance: 1e-9 },
  { name: "SmLs01", set: smls01, tolerance: 1e-9 },
  { name: "AtmWtAg", set: atmwtag, tolerance: 1e-7 },
  { name: "SmLs04", set: smls04, tolerance: 1e-7 },
  { name: "SmLs07, thirteen constant leading digits", set: smls07, tolerance: 1e-2 },
])("StRD $name", ({ set, tolerance }) => {
  test("every certified figure", () => {
    const found = oneWayAnova(groupsOf(set.data));
    const { certified } = set;
    expect(found?.between.dof).toBe(certified.df_between);
    expect(found?.within.dof).toBe(certified.df_within);
    expect(relativeError(found?.between.sumOfSquares, certified.ss_between)).toBeLessThan(tolerance);
    expect(relativeError(found?.within.sumOfSquares, certified.ss_within)).toBeLessThan(tolerance);
    expect(relativeError(found?.between.meanSquare, certified.ms_between)).toBeLessThan(tolerance);
    expect(relativeError(found?.within.meanSquare, certified.ms_within)).toBeLessThan(tolerance);
    expect(relativeError(found?.f, certified.F)).toBeLessThan(tolerance);
    expect(relativeError(found?.rSquared, certified.r_squared)).toBeLessThan(tolerance);
    expect(relativeError(found?.withinSd, certified.residual_sd)).toBeLessThan(tolerance);
  });
});

/** ISO 5725-2:1994 Annex B.1, sulfur in coal: groups of unequal size. */
describe.each(iso5725.levels)("ISO 5725-2 example, level $level", ({ data, printed, computed_unrounded }) => {
  test("repeatability and reproducibility", () => {
    const found = oneWayAnova(groupsOf(data));
    expect(relativeError(found?.mean, computed_unrounded.mean)).toBeLessThan(1e-12);
    expect(relativeError(found?.withinSd, computed_unrounded.s_r)).toBeLessThan(1e-6);
    expect(relativeError(found?.betweenSd, computed_unrounded.s_L)).toBeLessThan(1e-6);
    expect(relativeError(found?.totalSd, computed_unrounded.s_R)).toBeLessThan(1e-6);
    expect(Math.abs((found?.withinSd ?? NaN) - printed.s_r)).toBeLessThan(0.00051);
    expect(Math.abs((found?.totalSd ?? NaN) - printed.s_R)).toBeLessThan(0.00051);
  });
});

/** JCGM 100:2008 H.5: ten days of five observations with these means and standard deviations. */
describe("GUM H.5", () => {
  const { daily_means_V, daily_standard_deviations_uV, computed, printed } = gum.H5_one_way_anova;
  // Five values with a given mean and standard deviation: −2, −1, 0, 1, 2 have variance 2.5.
  const groups = daily_means_V.map((mean, day) =>
    Float64Array.of(-2, -1, 0, 1, 2).map((place) => (mean - 10) * 1e6 + (place * daily_standard_deviations_uV[day]) / Math.sqrt(2.5)),
  );
  const found = oneWayAnova(groups);

  test("components of variance and F", () => {
    expect(relativeError(found?.mean, computed.mean_uV_above_10V)).toBeLessThan(1e-9);
    expect(relativeError(found?.withinSd, computed.s_b_uV)).toBeLessThan(1e-9);
    expect(relativeError(Math.sqrt(found?.between.meanSquare ?? NaN), computed.s_a_uV)).toBeLessThan(1e-9);
    expect(relativeError(found?.betweenSd, computed.s_B_uV)).toBeLessThan(1e-9);
    expect(relativeError(found?.f, computed.F_unrounded)).toBeLessThan(1e-9);
    expect(Math.round(found?.betweenSd ?? NaN)).toBe(printed.between_day_s_B_uV);
    expect(Math.round(found?.withinSd ?? NaN)).toBe(printed.s_b_uV);
  });
  test("F quantiles", () => {
    expect(fCdf(computed.F_95_9_40, { numerator: 9, denominator: 40 })).toBeCloseTo(0.95, 9);
    expect(fCdf(computed.F_975_9_40, { numerator: 9, denominator: 40 })).toBeCloseTo(0.975, 9);
    expect(found?.p).toBeGreaterThan(0.025);
    expect(found?.p).toBeLessThan(0.05);
  });
});

/** JCGM 100:2008 G.4.1 and H.1. */
describe("effective degrees of freedom", () => {
  test("G.4.1", () => {
    const { relative_u_percent, n, computed, printed } = gum.welch_satterthwaite.G4_example;
    const found = effectiveDof(relative_u_percent.map((u, i) => ({ u, dof: n[i] - 1 })));
    expect(relativeError(found.u, computed.u_c)).toBeLessThan(1e-12);
    expect(relativeError(found.dof, computed.nu_eff)).toBeLessThan(1e-12);
    expect(Math.round(found.dof)).toBe(printed.nu_eff);
    expect(relativeError(studentTQuantile(0.975, Math.round(found.dof)), computed.t_95)).toBeLessThan(1e-9);
    expect(relativeError(studentTQuantile(0.975, Math.round(found.dof)) * found.u, computed.U_95)).toBeLessThan(1e-9);
  });
  test("H.1: end gauge", () => {
    const { computed, contributions_nm, nu_d, result } = gum.H1;
    const difference = effectiveDof([{ u: 13 / Math.sqrt(5), dof: 24 }, { u: 3.9, dof: 5 }, { u: 6.7, dof: 8 }]);
    expect(relativeError(difference.u, computed.u_d)).toBeLessThan(2e-3); // 5.8 nm is printed for 13/√5
    expect(difference.dof).toBeGreaterThan(25);
    expect(difference.dof).toBeLessThan(26);
    // The published sum is of contributions as printed.
    const found = effectiveDof([
      { u: contributions_nm.l_s, dof: 18 },
      { u: contributions_nm.d, dof: nu_d },
      { u: contributions_nm.d_alpha, dof: 50 },
      { u: contributions_nm.d_theta, dof: 2 },
    ]);
    expect(relativeError(found.u, computed.u_c)).toBeLessThan(1e-9);
    expect(relativeError(found.dof, computed.nu_eff)).toBeLessThan(1e-3);
    expect(Math.floor(found.dof)).toBe(result.nu_eff);
    expect(relativeError(studentTQuantile(0.995, Math.floor(found.dof)), computed.k_99)).toBeLessThan(1e-9);
    expect(relativeError(studentTQuantile(0.995, Math.floor(found.dof)) * found.u, computed.U_99)).toBeLessThan(1e-9);
  });
  test("known uncertainties have infinitely many; impossible ones are errors", () => {
    expect(effectiveDof([{ u: 1, dof: Infinity }])).toEqual({ u: 1, dof: Infinity });
    expect(effectiveDof([]).dof).toBeNaN();
    expect(() => effectiveDof([{ u: 1, dof: 0 }])).toThrow(RangeError);
    expect(() => effectiveDof([{ u: -1, dof: 1 }])).toThrow(RangeError);
  });
});

/** NIST/ITL Statistical Reference Datasets, univariate summary statistics. */
describe("StRD mean and standard deviation", () => {
  const made: Record<string, [middle: number, low: number, high: number]> = {
    NumAcc2: [1.2, 1.1, 1.3],
    NumAcc3: [1000000.2, 1000000.1, 1000000.3],
    NumAcc4: [10000000.2, 10000000.1, 10000000.3],
  };
  const tolerances: Record<string, number> = { NumAcc3: 1e-8, NumAcc4: 1e-7 };

  test.each(univariate.sets.map(({ dataset, certified, data }) => ({ dataset, certified, data: data as unknown })))("$dataset", ({ dataset, certified, data }) => {
    const values = Array.isArray(data)
      ? Float64Array.from(data as number[])
      : Float64Array.from({ length: 1001 }, (_, i) => made[dataset][i === 0 ? 0 : i % 2 === 1 ? 1 : 2]);
    const { mean, sd } = meanAndSd(values);
    expect(relativeError(mean, certified.mean)).toBeLessThan(1e-14);
    expect(relativeError(sd, certified.standard_deviation)).toBeLessThan(tolerances[dataset] ?? 1e-12);
  });
  test("none and one", () => {
    expect(meanAndSd(new Float64Array(0)).mean).toBeNaN();
    expect(meanAndSd(Float64Array.of(4))).toMatchObject({ mean: 4, sd: NaN });
  });
});

test("a shift of all values changes no component, the order of groups nothing", () => {
  const group = fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 1, maxLength: 8 }).map((list) => Float64Array.from(list));
  fc.assert(
    fc.property(fc.array(group, { minLength: 2, maxLength: 6 }), fc.integer({ min: -1000, max: 1000 }), (groups, shift) => {
      const [plain, moved] = [groups, groups.map((one) => one.map((value) => value + shift)).reverse()].map((one) => oneWayAnova(one));
      expect(moved?.withinSd).toBeCloseTo(plain?.withinSd ?? NaN, 8);
      expect(moved?.betweenSd ?? 0).toBeCloseTo(plain?.betweenSd ?? 0, 6);
    }),
  );
});

test("one group, single values, and values that are not finite", () => {
  expect(oneWayAnova([Float64Array.of(1, 2)])).toBeUndefined();
  expect(oneWayAnova([Float64Array.of(1), Float64Array.of(2)])).toBeUndefined();
  expect(oneWayAnova([Float64Array.of(1, 3), new Float64Array(0), Float64Array.of(2)])?.within.dof).toBe(1);
  expect(oneWayAnova([Float64Array.of(1, 1), Float64Array.of(2, 2)])).toMatchObject({ f: Infinity, p: 0, withinSd: 0 });
  expect(() => oneWayAnova([Float64Array.of(1, NaN), Float64Array.of(2)])).toThrow(RangeError);
});
