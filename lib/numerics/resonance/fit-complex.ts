import { isBent } from "@/lib/numerics/resonance/bend";
import { descend } from "@/lib/numerics/resonance/descend";
import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import { circleGuess, gridGuess, type Guess } from "@/lib/numerics/resonance/first-guess";
import { countInBand, judge } from "@/lib/numerics/resonance/judge";
import { prepareSweep, type PreparedSweep } from "@/lib/numerics/resonance/prepare";
import { emptyProjectedModel, type ProjectedModel } from "@/lib/numerics/resonance/projected-model";
import { residualsOf, type Residuals } from "@/lib/numerics/resonance/residuals";
import type { FitOptions, Readout, ResonanceFit, Sweep } from "@/lib/numerics/resonance/types";

type Solution = Guess & { settled: boolean; model: ProjectedModel; residuals: Residuals };

/** Below this amplitude to noise, or with residuals correlated beyond DOUBTFUL_SIGMAS/√n, a solution is doubted and the grid is asked too. */
const TRUSTED_SNR = 6;
const DOUBTFUL_SIGMAS = 3;
/** A resonance must explain this much of the sum of squares, in variances of one quadrature, beyond 2 ln n. */
const LEAST_GAIN = 20;

const models: [ProjectedModel, ProjectedModel] = [emptyProjectedModel(), emptyProjectedModel()];

/** The fit of a complex sweep; see fitResonance. */
export function fitComplexSweep(sweep: Extract<Sweep, { kind: "complex" }>, options: FitOptions): ResonanceFit {
  const { readout, dwellS, offsetSlope = true, guess } = options;
  const p = prepareSweep(sweep, offsetSlope);
  if (!(p.high > p.low) || !(p.energy > 0)) return failedFit(0);
  const freedom = 2 * p.n - (offsetSlope ? 8 : 6);

  let evaluations = 0;
  const solve = (start: Guess): Solution => {
    const end = descend(p, readout, start, models);
    evaluations += end.evaluations + 1;
    const model = { ...models[0], columns: models[0].columns.slice() };
    return { ...end, model, residuals: residualsOf(p, readout, end.f0, end.q, model) };
  };
  const trusted = (s: Solution): boolean =>
    s.settled && s.f0 >= p.low && s.f0 <= p.high &&
    Math.hypot(s.model.aRe, s.model.aIm) ** 2 > (TRUSTED_SNR ** 2 * s.residuals.squares) / freedom &&
    s.residuals.lag1 < DOUBTFUL_SIGMAS / Math.sqrt(p.n);

  const first = guess ? { f0: guess.f0Hz, q: guess.q } : circleGuess(p);
  let best = first && solve(first);
  if (guess && !(best && trusted(best))) best = better(best, solveIf(circleGuess(p), solve));
  if (!(best && trusted(best))) {
    const grid = gridGuess(p, readout);
    evaluations += grid.evaluations;
    best = better(best, solve(grid.guess));
  }
  if (!best || !best.settled) return failedFit(evaluations);
  return describe(p, best, { readout, dwellS, freedom, evaluations });
}

function solveIf(start: Guess | undefined, solve: (start: Guess) => Solution): Solution | undefined {
  return start && solve(start);
}

/** The one that settled, and of two such the one with the smaller residuals. */
function better(one: Solution | undefined, other: Solution | undefined): Solution | undefined {
  if (!one || !other) return one ?? other;
  if (one.settled !== other.settled) return one.settled ? one : other;
  return other.residuals.squares < one.residuals.squares ? other : one;
}

function describe(
  p: PreparedSweep,
  { f0, q, model, residuals }: Solution,
  { readout, dwellS, freedom, evaluations }: { readout: Readout; dwellS?: number; freedom: number; evaluations: number },
): ResonanceFit {
  const variance = residuals.squares / freedom;
  const determinant = model.hh * model.qq - model.hq * model.hq;
  const explained = p.energy - residuals.squares;
  const amplitude = Math.hypot(model.aRe, model.aIm);
  if (!(determinant > 0) || !Number.isFinite(amplitude) || explained < (LEAST_GAIN + 2 * Math.log(p.n)) * variance) {
    return failedFit(evaluations);
  }
  const perShift = f0 / (2 * q);
  const f0f0 = (perShift * perShift * variance * model.qq) / determinant;
  const qq = (q * q * variance * model.hh) / determinant;
  const f0q = (-perShift * q * variance * model.hq) / determinant;
  const noise = Math.sqrt(variance);
  const snr = noise > 0 ? amplitude / noise : Infinity;
  const doubtful = residuals.lag1 > DOUBTFUL_SIGMAS / Math.sqrt(p.n);
  const { bent, evaluations: more } = isBent(p, readout, { f0, q, residuals }, doubtful);
  return {
    f0Hz: f0,
    q,
    f0StdHz: Math.sqrt(f0f0),
    qStd: Math.sqrt(qq),
    covariance: { f0f0, f0q, qq },
    amplitude,
    noise,
    snr,
    flags: judge({
      f0Hz: f0, q, snr, low: p.low, high: p.high, points: p.n,
      pointsInBand: countInBand(p.f, p.n, f0, q), lag1: residuals.lag1, bent, dwellS,
    }),
    ...linearPart(p, model),
    evaluations: evaluations + more,
  };
}

/** a as found; b and c from what the projection took out. */
function linearPart(p: PreparedSweep, { aRe, aIm, meanRe, meanIm, slopeRe, slopeIm }: ProjectedModel): Pick<ResonanceFit, "a" | "b" | "c"> {
  const eRe = meanRe / p.n;
  const eIm = meanIm / p.n;
  const perNorm = p.slopeNorm > 0 ? 1 / p.slopeNorm : 0;
  const c = {
    re: (p.slopeRe - (aRe * slopeRe - aIm * slopeIm)) * perNorm,
    im: (p.slopeIm - (aRe * slopeIm + aIm * slopeRe)) * perNorm,
  };
  const b = {
    re: p.meanRe - (aRe * eRe - aIm * eIm) - c.re * p.slopeMean,
    im: p.meanIm - (aRe * eIm + aIm * eRe) - c.im * p.slopeMean,
  };
  return { a: { re: aRe, im: aIm }, b, c };
}
