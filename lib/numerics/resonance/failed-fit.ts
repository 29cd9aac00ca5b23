import type { ResonanceFit } from "@/lib/numerics/resonance/types";

/** The answer when there is none: flag `failed`, every number NaN. */
export function failedFit(evaluations: number): ResonanceFit {
  const nothing = { re: NaN, im: NaN };
  return {
    f0Hz: NaN, q: NaN, f0StdHz: NaN, qStd: NaN, covariance: { f0f0: NaN, f0q: NaN, qq: NaN },
    amplitude: NaN, noise: NaN, snr: NaN, flags: ["failed"],
    a: { ...nothing }, b: { ...nothing }, c: { ...nothing }, evaluations,
  };
}
