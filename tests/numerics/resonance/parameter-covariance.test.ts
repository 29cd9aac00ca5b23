import { expect, test } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { parameterCovariance } from "@/lib/numerics/resonance/parameter-covariance";
import { linearGrid, RESONANCE_PARAMETERS, type Readout } from "@/lib/numerics/resonance/types";

const truth = { f0Hz: 1098.42, q: 21.84, a: { re: 0.97, im: -0.23 }, b: { re: 0.06, im: 0.04 }, c: { re: -0.012, im: 0.019 } };
const frequencyHz = linearGrid(980, 1220, 401);

/** Box–Muller on a generator of fixed seed. */
function gaussian(seed: number): () => number {
  let state = seed >>> 0;
  const uniform = () => ((state = (Math.imul(state, 1664525) + 1013904223) >>> 0) + 0.5) / 2 ** 32;
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

function fitted(readout: Readout, offsetSlope: boolean, noise: number, normal: () => number) {
  const { re, im } = evaluateResonance(frequencyHz, { ...truth, readout, ...(offsetSlope ? {} : { c: undefined }) });
  return fitResonance({ kind: "complex", frequencyHz, re: re.map((value) => value + noise * normal()), im: im.map((value) => value + noise * normal()) }, { readout, offsetSlope });
}

test.each(["velocity", "displacement"] as const)("of f0 and Q it is what the fit states, %s readout, with and without a slope", (readout) => {
  for (const offsetSlope of [true, false]) {
    const fit = fitted(readout, offsetSlope, 1e-3, gaussian(7));
    const covariance = parameterCovariance(frequencyHz, fit, { readout, offsetSlope });
    const size = offsetSlope ? 8 : 6;
    expect(covariance).toHaveLength(size * size);
    expect(Math.sqrt(covariance?.[0] ?? NaN) / fit.f0StdHz).toBeCloseTo(1, 3);
    expect(Math.sqrt(covariance?.[size + 1] ?? NaN) / fit.qStd).toBeCloseTo(1, 3);
    expect((covariance?.[1] ?? NaN) / (fit.f0StdHz * fit.qStd)).toBeCloseTo(fit.covariance.f0q / (fit.f0StdHz * fit.qStd), 2);
  }
});

test("standard uncertainties and correlations of all eight are those of the scatter of 600 fits", () => {
  const normal = gaussian(20260514);
  const noise = 2e-3;
  const fits = Array.from({ length: 600 }, () => fitted("velocity", true, noise, normal)).map(({ f0Hz, q, a, b, c }) => [f0Hz, q, a.re, a.im, b.re, b.im, c.re, c.im]);
  const covariance = parameterCovariance(frequencyHz, { ...truth, noise }, { readout: "velocity" }) as Float64Array;
  const means = RESONANCE_PARAMETERS.map((_, j) => fits.reduce((sum, fit) => sum + fit[j] / fits.length, 0));
  const scatter = (i: number, j: number) => fits.reduce((sum, fit) => sum + ((fit[i] - means[i]) * (fit[j] - means[j])) / (fits.length - 1), 0);
  RESONANCE_PARAMETERS.forEach((_, j) => {
    expect(Math.sqrt(scatter(j, j) / covariance[j * 8 + j])).toBeGreaterThan(0.88);
    expect(Math.sqrt(scatter(j, j) / covariance[j * 8 + j])).toBeLessThan(1.12);
    const correlation = scatter(0, j) / Math.sqrt(scatter(0, 0) * scatter(j, j));
    expect(Math.abs(correlation - covariance[j] / Math.sqrt(covariance[0] * covariance[j * 8 + j]))).toBeLessThan(0.15);
  });
});

test("a sweep without a resonance has none", () => {
  expect(parameterCovariance(frequencyHz, { f0Hz: 1098, q: 20, a: { re: 0, im: 0 }, noise: 1 }, { readout: "velocity" })).toBeUndefined();
});
