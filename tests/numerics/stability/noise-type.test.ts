import { describe, expect, test } from "vitest";
import { identifyNoise } from "@/lib/numerics/stability/noise-type";
import reference from "@/tests/reference/1-frequency-stability/noise-identification.json";
import { lcgSeries } from "@/tests/numerics/stability/lcg-series";
import { relativeError } from "@/tests/numerics/relative-error";

/** Method of Riley and Greenhall (18th EFTF, 2004) on the 1000-point set of NIST SP 1065: white FM throughout. */
describe("1000-point set", () => {
  test.each(reference.computed_for_1000_point_series)("m = $averaging_factor", ({ averaging_factor, frequency_data }) => {
    const found = identifyNoise([lcgSeries()], averaging_factor);
    expect(found?.alpha).toBe(0);
    expect(found?.differences).toBe(frequency_data.differences);
    expect(relativeError(found?.r1, frequency_data.r1)).toBeLessThan(1e-6);
    expect(relativeError(found?.delta, frequency_data.delta)).toBeLessThan(1e-6);
  });
});
