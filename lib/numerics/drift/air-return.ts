import { checkReferences, type AirReferences, type Before } from "@/lib/numerics/drift/air-references";
import { ageing } from "@/lib/numerics/drift/ageing";
import { cleanedAgain, type CleanedAgain } from "@/lib/numerics/drift/cleaned-again";
import { jointProblem } from "@/lib/numerics/drift/joint-problem";
import { findSteps } from "@/lib/numerics/drift/steps";
import { normalQuantile, studentTQuantile } from "@/lib/numerics/statistics/distributions";

export type GrowthKind = "none" | "residue" | "ageing" | "undecided";

export type AirReturn = {
  /** What moved f0 most; `too few` below ten references after ordinary cleans. */
  verdict: GrowthKind | "step" | "too few";
  growth?: {
    kind: GrowthKind;
    f0PpmPerDay: number;
    f0U: number;
    qPercentPerDay: number;
    qU: number;
    /** Change of f0 by growth over the record, ppm. */
    totalPpm: number;
    /**
     * Loss factor that what grew on the sensor would have, κ = (dQ/Q) / (2 Q df0/f0): near 0 for a change without loss, a
     * tenth or more for a liquid or soft film.
     */
    lossFactor: number;
    lossFactorU: number;
    /** What Q does beside f0. */
    q: "falls" | "quiet" | "rises" | "unclear";
    /** AICc of logarithmic ageing less that of a straight growth; clearly below 0 for ageing. */
    logarithmic?: number;
  };
  cleanedAgain: CleanedAgain;
  steps: readonly { index: number; atDays: number; f0Ppm: number; f0U: number; qPercent: number; qU: number }[];
  n: number;
};

const fewestReferences = 10;
/** Probability of all decisions, two-sided. */
const sure = 0.99;
/** A loss factor surely below this has no liquid or soft film in it; our choice. */
const quietLoss = 0.05;
/** AICc difference below which ageing is taken for clearly logarithmic. */
const clearlyLogarithmic = -6;

/**
 * Whether the air reference comes back, and if not, whether residue, ageing or a step keeps it away.
 *
 *   residue  lowers f0 and, being lossy, Q with it, or goes when cleaned again
 *   ageing   moves f0 without loss (or slows logarithmically) and stays when cleaned again
 *   step     moves f0 at once
 *
 * Growth is the slope of f0 fitted together with re-mounts, levels after a clean-again and steps found, under noise of
 * unknown kind; Q likewise. Every decision is at 99 %. What contradicts itself, or cannot be told, is undecided.
 *
 * @param references At times in days, rising, all finite.
 * @returns The verdict and every number behind it. References after a clean-again tell whether that took something off;
 *   growth and steps are judged on the others.
 * @throws RangeError if lengths differ, times do not rise, a value is not finite, Q is not above 0, or there are more than
 *   3 000 references.
 *
 * A mass δm lowers f0 by δm/2m and, with a loss factor κ of its own, raises 1/Q by κ δm/m: relation of the damped
 * oscillator. The rules are our choice.
 */
export function judgeAirReturn(references: AirReferences): AirReturn {
  checkReferences(references);
  const again = cleanedAgain(references, sure);
  const ordinary = ordinaryOf(references);
  const n = ordinary.atDays.length;
  if (n < fewestReferences) return { verdict: "too few", cleanedAgain: again, steps: [], n };

  const found = stepsWithinMounts(ordinary);
  const places = [...ordinary.levels, ...found].sort((a, b) => a - b);
  const fitOf = (values: Float64Array) => jointProblem({ atDays: ordinary.atDays, values, steps: places }).fit([]);
  const [f0, q] = [fitOf(ordinary.f0Ppm), fitOf(ordinary.qPercent)];
  const uOf = (fit: typeof f0, j: number) => Math.sqrt(fit.covariance[j * (places.length + 2)]);
  const steps = found.map((index) => {
    const j = places.indexOf(index) + 1;
    return { index: ordinary.origin[index], atDays: ordinary.atDays[index], f0Ppm: f0.coefficients[j], f0U: uOf(f0, j), qPercent: q.coefficients[j], qU: uOf(q, j) };
  });

  const slopes = { f0: f0.coefficients[0], f0U: uOf(f0, 0), q: q.coefficients[0], qU: uOf(q, 0) };
  const loss = lossFactor(slopes, references.baselineQ);
  const grows = Math.abs(slopes.f0) > studentTQuantile((1 + sure) / 2, f0.dof) * slopes.f0U;
  const logarithmic = places.length === 0 ? ageing({ x: ordinary.atDays, y: ordinary.f0Ppm })?.aiccDifference : undefined;
  const kind = grows ? kindOf({ falls: slopes.f0 < 0, q: loss.q, again: again.takesOff, logarithmic }) : "none";
  const totalPpm = slopes.f0 * (ordinary.atDays[n - 1] - ordinary.atDays[0]);
  const stepped = Math.abs(steps.reduce((sum, { f0Ppm }) => sum + f0Ppm, 0));
  return {
    verdict: steps.length > 0 && (!grows || stepped > Math.abs(totalPpm)) ? "step" : kind,
    growth: {
      kind,
      f0PpmPerDay: slopes.f0,
      f0U: slopes.f0U,
      qPercentPerDay: slopes.q,
      qU: slopes.qU,
      totalPpm,
      lossFactor: loss.value,
      lossFactorU: loss.u,
      q: loss.q,
      logarithmic,
    },
    cleanedAgain: again,
    steps,
    n,
  };
}

/**
 * References after ordinary cleans and re-mounts; `levels` are the places where the level is free: at re-mounts, and after a
 * clean-again as long as these are few.
 */
function ordinaryOf({ atDays, f0Ppm, qPercent, before }: AirReferences) {
  const origin = before.flatMap((what, i) => (what === "cleanAgain" ? [] : [i]));
  const pick = (values: Float64Array) => Float64Array.from(origin, (i) => values[i]);
  const afterAgain = origin.flatMap((i, k) => (k > 0 && before[i] === "clean" && i - origin[k - 1] > 1 ? [k] : []));
  const mounts = origin.flatMap((i, k) => (k > 0 && remountBetween(before, origin[k - 1], i) ? [k] : []));
  const levels = [...new Set([...mounts, ...(afterAgain.length <= origin.length / 4 ? afterAgain : [])])];
  return { origin, atDays: pick(atDays), f0Ppm: pick(f0Ppm), qPercent: pick(qPercent), levels, mounts };
}

function remountBetween(before: readonly Before[], from: number, to: number): boolean {
  return before.slice(from + 1, to + 1).includes("remount");
}

/** Places of steps that are neither re-mounts nor next to where a clean-again may have moved the level. */
function stepsWithinMounts({ atDays, f0Ppm, levels, mounts }: ReturnType<typeof ordinaryOf>): number[] {
  const bounds = [0, ...mounts, atDays.length];
  return bounds.slice(1).flatMap((end, k) => {
    const start = bounds[k];
    const found = findSteps({ x: atDays.subarray(start, end), y: f0Ppm.subarray(start, end) });
    return found.map(({ index }) => start + index).filter((place) => levels.every((level) => Math.abs(level - place) > 1));
  });
}

function lossFactor(
  { f0, f0U, q, qU }: { f0: number; f0U: number; q: number; qU: number },
  baselineQ: number,
): { value: number; u: number; q: "falls" | "quiet" | "rises" | "unclear" } {
  const perFraction = 1e-2 / (2 * baselineQ * f0 * 1e-6);
  const value = q * perFraction;
  const u = Math.hypot(qU * perFraction, (value * f0U) / f0);
  const margin = normalQuantile((1 + sure) / 2);
  if (q < -margin * qU) return { value, u, q: Math.abs(value) + margin * u < quietLoss ? "quiet" : "falls" };
  if (q > margin * qU) return { value, u, q: Math.abs(value) + margin * u < quietLoss ? "quiet" : "rises" };
  return { value, u, q: Math.abs(value) + margin * u < quietLoss ? "quiet" : "unclear" };
}

function kindOf({
  falls,
  q,
  again,
  logarithmic,
}: {
  falls: boolean;
  q: NonNullable<AirReturn["growth"]>["q"];
  again: CleanedAgain["takesOff"];
  logarithmic?: number;
}): GrowthKind {
  const couldBeResidue = falls && again !== "no" && q !== "rises";
  const couldBeAgeing = again !== "yes" && q !== "falls";
  if (couldBeResidue && (again === "yes" || q === "falls")) return "residue";
  if (couldBeAgeing && (q === "quiet" || again === "no" || (logarithmic ?? 0) < clearlyLogarithmic)) return "ageing";
  return "undecided";
}
