import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import { countInBand, judge } from "@/lib/numerics/resonance/judge";
import { magnitudeGuesses } from "@/lib/numerics/resonance/magnitude-guess";
import {
  emptyMagnitudeModel, MAGNITUDE_PARAMETERS, magnitudeModel,
  type MagnitudeModel, type MagnitudeParameters, type MagnitudeSweep,
} from "@/lib/numerics/resonance/magnitude-model";
import { checkSweep } from "@/lib/numerics/resonance/prepare";
import { riceMean } from "@/lib/numerics/resonance/rice";
import { inverseColumn, solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { FitOptions, Readout, ResonanceFit, Sweep } from "@/lib/numerics/resonance/types";

const MOST_STEPS = 200;
/** Rounds in which the noise, and with it the bias of the modulus, is found anew; until it moves by less than SAME_NOISE. */
const NOISE_ROUNDS = 10;
const SAME_NOISE = 2e-3;
/** Where |z| is below this many noises anywhere, its mean is Rice's. */
const RICE_BELOW = 5;
/** Done when a step promises less than this share of a variance. */
const SMALL_GAIN = 1e-5;
/**
 * Done too when so many evaluations gained less than that share of a variance: with hardly any offset its phase is a flat
 * valley along which steps shrink only slowly, while f0 and Q stand still.
 */
const STALL = 15;
const STALL_GAIN = 1e-3;
/** A direction the data do not determine (slope across a large offset) is held by this share of its own weight. */
const RIDGE = 1e-9;
const DOUBTFUL_SIGMAS = 3;
const LEAST_GAIN = 20;

type Noise = { sigma: number; weight: Float64Array };
type Solution = { at: MagnitudeParameters; model: MagnitudeModel; settled: boolean; evaluations: number };

/** The fit of a magnitude sweep; see fitResonance. */
export function fitMagnitudeSweep(sweep: Extract<Sweep, { kind: "magnitude" }>, options: FitOptions): ResonanceFit {
  const { readout, dwellS, offsetSlope = true, guess } = options;
  checkSweep(sweep);
  const data = sorted(sweep);
  const { n, f } = data;
  if (!(f[n - 1] > f[0])) return failedFit(0);
  const free = offsetSlope ? MAGNITUDE_PARAMETERS : MAGNITUDE_PARAMETERS - 2;
  const even: Noise = { sigma: 0, weight: new Float64Array(n).fill(1) };

  const { guesses, evaluations: tried } = magnitudeGuesses(data, readout);
  const starts = guess ? [...guesses, { ...guesses[0], f0: guess.f0Hz, q: guess.q }] : guesses;
  let evaluations = tried;
  let best: Solution | undefined;
  for (const wave of [starts, varied(guesses)]) {
    for (const start of wave) {
      const end = descendMagnitude(data, readout, start, even, free);
      evaluations += end.evaluations;
      if (end.settled && (!best || isBetter(end, best))) best = end;
    }
    if (best && lag1Of(best.model.residual) < DOUBTFUL_SIGMAS / Math.sqrt(n)) break;
  }
  if (!best) return failedFit(evaluations);

  let noise = Math.sqrt(best.model.cost / (n - free));
  if (best.model.modulus.some((nu) => nu < RICE_BELOW * noise)) {
    for (let round = 0; round < NOISE_ROUNDS; round++) {
      const next = descendMagnitude(data, readout, best.at, riceNoise(best.model, noise), free);
      evaluations += next.evaluations;
      if (!next.settled) break;
      best = next;
      const last = noise;
      noise = Math.sqrt(best.model.cost / (n - free));
      if (Math.abs(noise - last) < SAME_NOISE * last) break;
    }
  }
  return describe(data, best, { dwellS, noise, free, evaluations });
}

/** Lower cost; of equals, which mirrored offsets are, the smaller offset. */
function isBetter(one: Solution, other: Solution): boolean {
  const scale = Math.max(one.model.cost, other.model.cost);
  if (Math.abs(one.model.cost - other.model.cost) > 1e-6 * scale) return one.model.cost < other.model.cost;
  return Math.hypot(one.at.bRe, one.at.bIm) < Math.hypot(other.at.bRe, other.at.bIm);
}

/** Further starts, for when the first end in a side valley: wider and narrower, the offset turned against the resonance. */
function varied(guesses: MagnitudeParameters[]): MagnitudeParameters[] {
  return guesses.flatMap((guess) =>
    [0.6, 1, 1.6].flatMap((stretch) =>
      [1, -1].map((sign) => ({ ...guess, q: guess.q * stretch, bRe: sign * guess.bRe, bIm: -guess.bIm, cRe: sign * guess.cRe, cIm: -guess.cIm })),
    ),
  );
}

function lag1Of(residual: Float64Array): number {
  let products = 0;
  let squares = residual[0] ** 2;
  for (let i = 1; i < residual.length; i++) {
    squares += residual[i] ** 2;
    products += residual[i] * residual[i - 1];
  }
  return squares > 0 ? products / squares : 0;
}

function sorted({ frequencyHz, magnitude }: Extract<Sweep, { kind: "magnitude" }>): MagnitudeSweep {
  const n = frequencyHz.length;
  const order = Uint32Array.from(frequencyHz.keys()).sort((i, j) => frequencyHz[i] - frequencyHz[j]);
  const f = Float64Array.from(order, (i) => frequencyHz[i]);
  const y = Float64Array.from(order, (i) => magnitude[i]);
  const middle = (f[0] + f[n - 1]) / 2;
  const s = f.map((v) => (v - middle) / (f[n - 1] - f[0]));
  return { n, f, s, y };
}

/** Weights of the next round: the variance of a modulus, 2σ² + ν² − mean², falls from σ² to 0.43σ² where ν vanishes. */
function riceNoise({ modulus }: MagnitudeModel, sigma: number): Noise {
  const weight = modulus.map((nu) => {
    const mean = riceMean(nu, sigma);
    const variance = 2 * sigma * sigma + (nu - mean) * (nu + mean);
    return (sigma * sigma) / Math.min(Math.max(variance, 0.42 * sigma * sigma), sigma * sigma);
  });
  return { sigma, weight };
}

/** Levenberg–Marquardt over the first `free` parameters. */
function descendMagnitude(data: MagnitudeSweep, readout: Readout, start: MagnitudeParameters, noise: Noise, free: number): Solution {
  let here = emptyMagnitudeModel(data.n);
  let there = emptyMagnitudeModel(data.n);
  let at = start;
  let damping = 1e-3;
  let evaluations = 1;
  magnitudeModel(data, readout, at, noise, here);
  const energy = data.y.reduce((sum, y) => sum + y * y, 0);
  let settled = false;
  let milestone = Infinity; // the cost STALL evaluations ago
  while (evaluations < MOST_STEPS && Number.isFinite(here.cost)) {
    const matrix = leading(here.gram, free, damping + RIDGE);
    const step = here.gradient.slice(0, free);
    if (!solveCholesky(matrix, step, free)) break;
    const gain = step.reduce((sum, d, j) => sum + d * here.gradient[j], 0);
    const small = damping <= 1 && gain <= (SMALL_GAIN * here.cost) / data.n + 1e-26 * energy;
    const cut = Math.max(1, Math.abs(step[0]), Math.abs(step[1]));
    const next = stepped(at, step, cut);
    magnitudeModel(data, readout, next, noise, there);
    evaluations++;
    if (there.cost <= here.cost) {
      at = next;
      [here, there] = [there, here];
      damping /= 10;
    } else {
      damping = Math.max(1e-6, damping * 10);
    }
    const stalled = evaluations % STALL === 0 && milestone - here.cost < (STALL_GAIN * here.cost) / data.n;
    if (evaluations % STALL === 0) milestone = here.cost;
    if (small || stalled || damping > 1e10) {
      settled = true;
      break;
    }
  }
  const span = data.f[data.n - 1] - data.f[0];
  const sensible = at.f0 > data.f[0] - span && at.f0 < data.f[data.n - 1] + span && at.q > 0.05 && at.q < (100 * data.n * data.f[data.n - 1]) / span;
  return { at, model: here, settled: settled && sensible, evaluations };
}

/** The leading block of the normal equations with its diagonal raised. */
function leading(gram: Float64Array, free: number, raise: number): Float64Array {
  const block = new Float64Array(free * free);
  for (let j = 0; j < free; j++) {
    for (let k = 0; k < free; k++) block[free * j + k] = gram[MAGNITUDE_PARAMETERS * j + k];
    block[(free + 1) * j] *= 1 + raise;
  }
  return block;
}

function stepped(at: MagnitudeParameters, step: Float64Array, cut: number): MagnitudeParameters {
  const d = (j: number): number => (j < step.length ? step[j] / cut : 0);
  let { a, bRe, bIm, cRe, cIm } = at;
  a += d(2);
  bRe += d(3);
  bIm += d(4);
  cRe += d(5);
  cIm += d(6);
  // The modulus is the same for the whole turned by half a circle: keep a positive.
  if (a < 0) [a, bRe, bIm, cRe, cIm] = [-a, -bRe, -bIm, -cRe, -cIm];
  return { f0: at.f0 * Math.exp(d(0) / (2 * at.q)), q: at.q * Math.exp(d(1)), a, bRe, bIm, cRe, cIm };
}

function describe(
  { n, f, y }: MagnitudeSweep,
  { at, model }: Solution,
  { dwellS, noise, free, evaluations }: { dwellS?: number; noise: number; free: number; evaluations: number },
): ResonanceFit {
  const block = leading(model.gram, free, RIDGE);
  const first = inverseColumn(block, 0, free);
  const second = inverseColumn(block, 1, free);
  const mean = y.reduce((sum, v) => sum + v, 0) / n;
  const explained = y.reduce((sum, v) => sum + (v - mean) ** 2, 0) - model.cost;
  const { f0, q, a } = at;
  if (!first || !second || !(explained > (LEAST_GAIN + 2 * Math.log(n)) * noise * noise)) return failedFit(evaluations);
  const perShift = f0 / (2 * q);
  const f0f0 = perShift * perShift * noise * noise * first[0];
  const qq = q * q * noise * noise * second[1];
  const f0q = perShift * q * noise * noise * first[1];
  const snr = noise > 0 ? a / noise : Infinity;
  return {
    f0Hz: f0, q, f0StdHz: Math.sqrt(f0f0), qStd: Math.sqrt(qq), covariance: { f0f0, f0q, qq }, amplitude: a, noise, snr,
    flags: judge({
      f0Hz: f0, q, snr, low: f[0], high: f[n - 1], points: n, pointsInBand: countInBand(f, n, f0, q),
      lag1: noise > 1e-12 * mean ? lag1Of(model.residual) : 0, bent: false, dwellS,
    }),
    a: { re: a, im: 0 }, b: { re: at.bRe, im: at.bIm }, c: { re: at.cRe, im: at.cIm }, evaluations,
  };
}
