import { choleskyInPlace } from "@/lib/numerics/drift/cholesky";
import { powerLawVariogram } from "@/lib/numerics/drift/power-law-variogram";
import { gaussian } from "@/tests/numerics/seeded-noise";

/**
 * Maker of series of discrete noise S_y(f) ∝ f^alpha, exact in distribution up to a constant: white (0) to random walk
 * (−2) FM by a factor of the covariance of their steps, white and flicker PM (2, 1) as differences of white and flicker phase.
 */
export function powerLawNoise({ alpha, length, seed }: { alpha: number; length: number; seed: number }): () => Float64Array {
  const next = gaussian(seed);
  if (alpha === 2) {
    return () => {
      const phase = Float64Array.from({ length: length + 1 }, next);
      return phase.subarray(1).map((value, i) => value - phase[i]);
    };
  }
  if (alpha === 1) {
    const makePhase = powerLawNoise({ alpha: -1, length: length + 1, seed });
    return () => {
      const phase = makePhase();
      return phase.subarray(1).map((value, i) => value - phase[i]);
    };
  }
  if (alpha === 0) return () => Float64Array.from({ length }, next);

  const steps = length - 1;
  const variogram = powerLawVariogram(alpha, length);
  const factor = new Float64Array(steps * steps);
  for (let i = 0; i < steps; i++) {
    for (let j = 0; j <= i; j++) {
      factor[i * steps + j] = (variogram[i - j + 1] + variogram[Math.abs(i - j - 1)] - 2 * variogram[i - j]) / 2;
    }
  }
  choleskyInPlace(factor, steps);
  return () => {
    const normal = Float64Array.from({ length: steps }, next);
    const y = new Float64Array(length);
    for (let i = 0; i < steps; i++) {
      let step = 0;
      for (let j = 0; j <= i; j++) step += factor[i * steps + j] * normal[j];
      y[i + 1] = y[i] + step;
    }
    return y;
  };
}
