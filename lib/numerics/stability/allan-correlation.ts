/** Beyond this ratio of averaging times two Allan variances are taken as uncorrelated. */
const farApart = 64;

/** Steps of the lag in the shorter averaging time. */
const stepsPerTau = 16;

/** Coefficients of S_y(f) = h₀ + h₋₁/f + h₋₂/f². */
export type NoiseLevels = { white: number; flicker: number; randomWalk: number };

/**
 * Correlation of the overlapping Allan variances of one long record at several averaging times.
 *
 *   R = ∫ c_AB(l)² dl / √(∫ c_AA² dl ∫ c_BB² dl)
 *
 * with c_AB(l) the covariance of two second differences of phase, spans A and B, their middles l apart; Gaussian noise.
 *
 * @param tausS Averaging times in seconds, above 0.
 * @returns Rows one after another, symmetric, 1 on the diagonal.
 *
 * Source: variance of a quadratic form of Gaussian variables (Isserlis); generalised phase covariances −(h₀/4)|t|,
 * (h₋₁/2) t² ln|t|, (π² h₋₂/6)|t|³ follow from the Allan variances in IEEE Std 1139-2008.
 */
export function allanCorrelation(tausS: readonly number[], levels: NoiseLevels): Float64Array {
  const n = tausS.length;
  const energies = tausS.map((tau) => squaredCovariance(tau, tau, levels));
  const correlation = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    correlation[i * n + i] = 1;
    for (let j = 0; j < i; j++) {
      const ratio = tausS[i] / tausS[j];
      if (ratio > farApart || ratio < 1 / farApart) continue;
      const both = squaredCovariance(tausS[i], tausS[j], levels);
      correlation[i * n + j] = correlation[j * n + i] = both / Math.sqrt(energies[i] * energies[j]);
    }
  }
  return correlation;
}

/** ∫ c_AB² over all lags, by the trapezoidal rule up to where nothing is left. */
function squaredCovariance(a: number, b: number, levels: NoiseLevels): number {
  const step = Math.min(a, b) / stepsPerTau;
  const last = Math.ceil((2 * (a + b)) / step);
  let sum = covariance(0, a, b, levels) ** 2;
  for (let k = 1; k <= last; k++) sum += 2 * covariance(k * step, a, b, levels) ** 2;
  return sum * step;
}

const weights = [1, -2, 1] as const;

function covariance(lag: number, a: number, b: number, levels: NoiseLevels): number {
  let sum = 0;
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) sum += weights[i] * weights[j] * phaseCovariance(lag + (j - 1) * b - (i - 1) * a, levels);
  }
  return sum;
}

function phaseCovariance(lag: number, { white, flicker, randomWalk }: NoiseLevels): number {
  const t = Math.abs(lag);
  if (t === 0) return 0;
  return (-white * t) / 4 + (flicker * t * t * Math.log(t)) / 2 + (Math.PI ** 2 * randomWalk * t * t * t) / 6;
}
