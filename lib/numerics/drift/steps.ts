import { blockMeans } from "@/lib/numerics/drift/block-means";
import { differencedSeries, noiseKinds } from "@/lib/numerics/drift/differenced-series";
import { glsFit } from "@/lib/numerics/drift/gls-fit";
import { addColumn, whitenedSeries, type WhitenedSeries } from "@/lib/numerics/drift/whitened-series";
import { longestWhitened, whiteners } from "@/lib/numerics/drift/whiteners";

export type Step = {
  /** Position and time of the first value (or block) after the step. */
  index: number;
  at: number;
  size: number;
  u: number;
};

/** A step must last: fewer values at another level are taken as wild ones. */
const shortestLevel = 3;

/** Twice the log-likelihood that a step must add, in units of ln n; in white noise |size|/u of 4.3 at n = 100. */
const penaltyFactor = 4;

const mostSteps = 20;

/**
 * Steps in a drifting series, by penalised generalised least squares: one slope, a level that jumps, and noise of
 * unknown kind, so that neither a drift nor flicker nor random walk is cut into stairs.
 *
 * Steps are added one at a time where they add most to the likelihood, averaged over kinds of noise (`noiseKinds`),
 * as long as twice its logarithm rises by more than 4 ln n. Sizes come from the joint fit of slope and all steps,
 * averaged over kinds by restricted likelihood; u holds the spread between them.
 *
 * @param x Times, rising, all finite.
 * @param y Values, one per x, all finite. A step needs three values on either side.
 * @returns Steps by time, sizes in the unit of y; none below eight values. More than 300 values are taken as block means,
 *   and positions are then those of blocks.
 * @throws RangeError if lengths differ, times do not rise, or a value is not finite.
 *
 * Source: penalty after N. R. Zhang and D. O. Siegmund, Biometrics 63 (2007) 22; noise as in `glsLine`. Steps under
 * power-law noise in place of white noise are our choice.
 */
export function findSteps({ x, y }: { x: Float64Array; y: Float64Array }): Step[] {
  if (x.length !== y.length) throw new RangeError("x and y must be equally long");
  if (!x.every(Number.isFinite) || !y.every(Number.isFinite)) throw new RangeError("a value is not finite");
  if (x.length < 8) return [];

  const blocks = blockMeans({ x, y }, longestWhitened);
  const series = differencedSeries(blocks);
  const models = noiseKinds.map((kind) => whitenedSeries(kind, series));
  const found: number[] = [];
  let likelihood = logMeanLikelihood(models, (model) => model.squares);
  while (found.length < mostSteps) {
    const best = likeliestStep(models, found);
    if (!best || !(2 * (best.likelihood - likelihood) > penaltyFactor * Math.log(blocks.x.length))) break;
    found.push(best.place);
    for (const model of models) addColumn(model, unit(best.place, series.dx.length));
    likelihood = best.likelihood;
  }
  if (found.length === 0) return [];

  found.sort((a, b) => a - b);
  const columns = [series.dx, ...found.map((place) => unit(place, series.dx.length))];
  const { coefficients, covariance } = glsFit({ noise: whiteners([blocks.x]), values: series.dy, columns });
  return found.map((place, k) => ({
    index: place + 1,
    at: blocks.x[place + 1],
    size: coefficients[k + 1],
    u: Math.sqrt(covariance[(k + 1) * (columns.length + 1)]),
  }));
}

/** In differences a step is a single one of them: a unit vector. */
function unit(place: number, size: number): Float64Array {
  return new Float64Array(size).fill(1, place, place + 1);
}

function likeliestStep(
  models: readonly WhitenedSeries[],
  found: readonly number[],
): { place: number; likelihood: number } | undefined {
  let best: { place: number; likelihood: number } | undefined;
  const size = models[0].residual.length;
  for (let place = shortestLevel - 1; place <= size - shortestLevel; place++) {
    if (found.some((other) => Math.abs(other - place) < shortestLevel)) continue;
    const likelihood = logMeanLikelihood(models, ({ squares, residual, diagonal }) =>
      Math.max(squares - residual[place] ** 2 / diagonal[place], 0),
    );
    if (!best || likelihood > best.likelihood) best = { place, likelihood };
  }
  return best;
}

/** Logarithm of the likelihood, slope and variance at their best, averaged over kinds of noise by their priors. */
function logMeanLikelihood(models: readonly WhitenedSeries[], squaresOf: (model: WhitenedSeries) => number): number {
  const size = models[0].residual.length;
  const logs = models.map((model) => model.logPrior - (size * Math.log(squaresOf(model) / size) + model.logDeterminant) / 2);
  const most = Math.max(...logs);
  return most === Infinity ? Infinity : most + Math.log(logs.reduce((sum, log) => sum + Math.exp(log - most), 0));
}
