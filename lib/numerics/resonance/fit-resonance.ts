import { fitComplexSweep } from "@/lib/numerics/resonance/fit-complex";
import { fitMagnitudeSweep } from "@/lib/numerics/resonance/fit-magnitude";
import type { FitOptions, ResonanceFit, Sweep } from "@/lib/numerics/resonance/types";

/**
 * Resonance frequency and quality factor of one sweep.
 *
 *   V(f) = a·m(f) / (1 + iQ(f/f0 − f0/f)) + b + c·(f − fm)/(f2 − f1)
 *
 * m is 1 for a velocity and f0/(if) for a displacement readout; a, b, c are complex: resonance, offset (ohmic or crosstalk),
 * its slope. Least squares with a, b, c eliminated, over ln f0 and ln Q. Of a magnitude sweep |V|² is fitted, whose mean and
 * variance are known for noise of any size; what it does not determine of a, b and c is said at fitMagnitudeSweep.
 *
 * @param sweep Frequencies in Hz, positive, in any order and spacing; at least 11 points.
 * @param options Readout; dwell per point in s for the flag `rushed`; whether the offset has a slope (default true); a guess, which
 *   only saves time.
 * @returns f0 in Hz, Q, their standard errors and covariance from the full Jacobian and the residual variance, a, b, c,
 *   amplitude |a|, noise per quadrature, and the flags
 *   - `failed`: no convergence, or no resonance told from the noise; every number is then NaN
 *   - `edge`: f0 outside the middle 80 % of the sweep
 *   - `bent`: f0 + κ|x|² fits better at 4σ and shifts the peak by more than 0.1 half-width
 *   - `narrow`: span below 2.5 half-widths f0/2Q
 *   - `sparse`: fewer than 3 points inside the half-power band
 *   - `noisy`: |a|/noise below 5
 *   - `distorted`: lag-1 autocorrelation of the residuals above 4/√N
 *   - `rushed`: dwell below 5 ring-down times Q/(πf0)
 * @throws RangeError for malformed input only: unequal lengths, fewer than 11 points, a number that is not finite, a frequency
 *   that is not positive, a guess that is not positive.
 *
 * Source: Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413; the flags are Longreed's own rules.
 * Cost: about 70 µs for 201 complex points without a guess, 200 µs for 201 magnitudes.
 */
export function fitResonance(sweep: Sweep, options: FitOptions): ResonanceFit {
  const { guess } = options;
  if (guess && !(guess.f0Hz > 0 && guess.f0Hz < Infinity && guess.q > 0 && guess.q < Infinity)) {
    throw new RangeError(`a guess must be positive and finite, got f0 ${guess.f0Hz} and Q ${guess.q}`);
  }
  return sweep.kind === "complex" ? fitComplexSweep(sweep, options) : fitMagnitudeSweep(sweep, options);
}
