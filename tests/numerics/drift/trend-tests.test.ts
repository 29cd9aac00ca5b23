import { describe, expect, test } from "vitest";
import { mannKendall } from "@/lib/numerics/drift/mann-kendall";
import { theilSen } from "@/lib/numerics/drift/theil-sen";
import reference from "@/tests/reference/5-metrology/trend-tests.json";
import { relativeError } from "@/tests/numerics/relative-error";

const [sulfate, sodium, sen, gilbert] = reference.examples;
const series = ({ x, y }: { x: number[]; y: number[] }) => ({ x: Float64Array.from(x), y: Float64Array.from(y) });

/** USEPA Unified Guidance, EPA 530/R-09-007 (2009), Examples 17-6 and 17-7. */
describe.each([
  { name: "sulfate, Example 17-6", example: sulfate },
  { name: "sodium, Example 17-7", example: sodium },
])("$name", ({ example }) => {
  const { x, y } = series(example);
  const { printed, computed } = example;

  test("Mann–Kendall: S, variance with ties, z, p, tau", () => {
    const found = mannKendall(y);
    expect(found?.s).toBe(computed.S);
    expect(found?.variance).toBe(computed.var);
    expect(relativeError(found?.z, printed.z ?? NaN)).toBeLessThan(1e-6);
    expect(relativeError(found?.p, printed.p ?? NaN)).toBeLessThan(1e-6);
    expect(relativeError(found?.tau, printed.tau ?? NaN)).toBeLessThan(1e-6);
  });

  test("Theil–Sen with interpolated ranks: slope, intercept, limits as printed", () => {
    const found = theilSen({ x, y });
    expect(relativeError(found?.slope, printed.slope ?? NaN)).toBeLessThan(1e-6);
    expect(relativeError(found?.intercept, printed.intercept ?? NaN)).toBeLessThan(1e-6);
    expect(relativeError(found?.lower, printed.lcl95 ?? NaN)).toBeLessThan(1e-6);
    expect(relativeError(found?.upper, printed.ucl95 ?? NaN)).toBeLessThan(1e-6);
  });

  test("Theil–Sen with rounded ranks gives the other limits", () => {
    const found = theilSen({ x, y, ranks: "rounded" });
    const [lower, upper] = example.integer_rank_limits ?? [];
    expect(relativeError(found?.lower, lower)).toBeLessThan(1e-6);
    expect(relativeError(found?.upper, upper)).toBeLessThan(1e-6);
  });
});

test("sodium: exact probability counted over all orders", () => {
  const found = mannKendall(series(sodium).y);
  expect(relativeError(found?.exactP, sodium.exact_two_sided_p ?? NaN)).toBeLessThan(1e-6);
});

test("sulfate has equal values, for which no exact probability is counted", () => {
  expect(mannKendall(series(sulfate).y)?.exactP).toBeUndefined();
});

/** P. K. Sen, J. Am. Stat. Assoc. 63 (1968) 1379: slope 4, 93 % limits 3.71 and 4.38. */
test("Sen's example with rounded ranks", () => {
  const found = theilSen({ ...series(sen), confidence: 0.93, ranks: "rounded" });
  expect(found?.slope).toBe(4);
  expect(relativeError(found?.lower, sen.computed.lower ?? NaN)).toBeLessThan(1e-6);
  expect(relativeError(found?.upper, sen.computed.upper ?? NaN)).toBeLessThan(1e-6);
  expect(Math.abs((found?.lower ?? NaN) - 3.71)).toBeLessThan(0.005);
  expect(Math.abs((found?.upper ?? NaN) - 4.38)).toBeLessThanOrEqual(0.005);
});

/** R. O. Gilbert (1987): S = 4 from four points has one-sided probability 0.167. */
test("Gilbert's four points", () => {
  const found = mannKendall(series(gilbert).y);
  expect(found?.s).toBe(4);
  expect(relativeError((found?.exactP ?? NaN) / 2, gilbert.computed.exact_one_sided_p ?? NaN)).toBeLessThan(1e-12);
});
