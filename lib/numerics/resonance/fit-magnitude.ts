import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import { countInBand, judge } from "@/lib/numerics/resonance/judge";
import { isMagnitudeBent } from "@/lib/numerics/resonance/magnitude-bend";
import { refineExactly, type Refined } from "@/lib/numerics/resonance/magnitude-refine";
import { averaged, narrowGuess, rationalGuess, wideGuess } from "@/lib/numerics/resonance/magnitude-guess";
import type { Shape } from "@/lib/numerics/resonance/magnitude-model";
import { firstWeights, settleShape, type MagnitudeSolution } from "@/lib/numerics/resonance/magnitude-settle";
import { prepareMagnitude, type MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import type { FitOptions, ResonanceFit, Sweep } from "@/lib/numerics/resonance/types";

/** A solution whose resonance explains less than this many variances, or whose residuals are correlated beyond DOUBTFUL_SIGMAS/√n, is doubted. */
const TRUSTED_GAIN = 100;
const DOUBTFUL_SIGMAS = 3;
/** A resonance must explain this much of the sum of squares, in variances of a point, beyond 2 ln n. */
const LEAST_GAIN = 20;

/**
 * The fit of a magnitude sweep; see fitResonance for its arguments.
 *
 * Fitted is |V|², whose mean |aE + b + cs|² + 2σ² and variance 4σ²(|aE + b + cs|² + σ²) are exact for Gaussian noise of any
 * size, so that no bias is left to correct; the weights follow from the fit itself (quasi-likelihood).
 *
 * A modulus determines f0 and Q, but not all of a, b and c. Their common phase is lost: a comes out real and positive, b and
 * c relative to it. Up to four sets have the same modulus (see magnitudeTerms), of which that of the smallest |a| is given;
 * so amplitude and snr are the least that the data allow, and nothing but the flag `noisy` rests on them. The sign of a
 * magnitude is not looked at. Not knowing that there is no offset, where there is none, makes the standard
 * error of Q up to 1.6 times as large; from a hundredth of |a| on hardly anything is lost.
 *
 * Source: quasi-likelihood, Wedderburn, Biometrika 61 (1974) 439; moments of Rice's distribution, Rice, Bell System Technical
 * Journal 24 (1945) 46, §3.10.
 */
export function fitMagnitudeSweep(sweep: Extract<Sweep, { kind: "magnitude" }>, options: FitOptions): ResonanceFit {
  const { readout, dwellS, offsetSlope = true, guess } = options;
  const p = prepareMagnitude(sweep, offsetSlope);
  if (!(p.high > p.low) || !(p.energy > 0)) return failedFit(0);
  const start = firstWeights(p);

  let evaluations = 0;
  let best: MagnitudeSolution | undefined;
  const attempt = (shape: Shape | undefined): void => {
    if (!shape) return;
    const end = settleShape(p, shape, start);
    evaluations += end.evaluations;
    if (end.settled && !(best && best.score <= end.score)) best = end;
  };
  const trusted = (): boolean =>
    best !== undefined && best.f0 >= p.low && best.f0 <= p.high &&
    best.explained > TRUSTED_GAIN && best.lag1 < DOUBTFUL_SIGMAS / Math.sqrt(p.n);

  if (guess) attempt({ f0: guess.f0Hz, q: guess.q, bend: 0 });
  const coarse = averaged(p, start);
  if (!trusted()) attempt(rationalGuess(coarse.sweep, coarse.weight));
  for (const search of [() => wideGuess(coarse.sweep, coarse.weight), () => narrowGuess(p, start)]) {
    if (trusted()) break;
    const { shape, evaluations: tried } = search();
    evaluations += tried;
    attempt(shape);
  }
  if (!best || !(best.explained > LEAST_GAIN + 2 * Math.log(p.n))) return failedFit(evaluations);
  const bend = isMagnitudeBent(p, best, best.lag1 > DOUBTFUL_SIGMAS / Math.sqrt(p.n));
  const refined = refineExactly(p, readout, best);
  return refined ? describe(p, refined, { dwellS, bent: bend.bent, evaluations: evaluations + bend.evaluations + refined.evaluations }) : failedFit(evaluations);
}

function describe(
  p: MagnitudeSweep,
  { f0, q, sigma, lag1, covariance: { hh, hq, qq }, terms: { a, bRe, bIm, cRe, cIm } }: Refined,
  { dwellS, bent, evaluations }: { dwellS?: number; bent: boolean; evaluations: number },
): ResonanceFit {
  const perShift = f0 / (2 * q);
  const variance = 4 * sigma * sigma;
  const covariance = { f0f0: perShift * perShift * variance * hh, f0q: perShift * q * variance * hq, qq: q * q * variance * qq };
  const snr = sigma > 0 ? a / sigma : Infinity;
  return {
    f0Hz: f0, q, f0StdHz: Math.sqrt(covariance.f0f0), qStd: Math.sqrt(covariance.qq), covariance, amplitude: a, noise: sigma, snr,
    flags: judge({
      f0Hz: f0, q, snr, low: p.low, high: p.high, points: p.n, pointsInBand: countInBand(p.f, p.n, f0, q), lag1, bent, dwellS,
    }),
    a: { re: a, im: 0 }, b: { re: bRe, im: bIm }, c: { re: cRe, im: cIm }, evaluations,
  };
}
