import { columnSearch } from "@/lib/numerics/drift/column-search";
import { glsFit, type GlsFit } from "@/lib/numerics/drift/gls-fit";
import { discardFor, type Discard } from "@/lib/numerics/drift/discard";
import { differencesWithin, longestWhitened, whiteners } from "@/lib/numerics/drift/whiteners";
import { leastBetween } from "@/lib/numerics/statistics/least-between";
import { median } from "@/lib/numerics/statistics/median";

/** The repeats of one phase, by time since drying ended (or since the phase began, where nothing was dried). */
export type CoolingPhase = { sinceDryS: Float64Array; values: Float64Array };

export type CoolingModel = "none" | "line" | "exponential" | "exponential and line";

export type Cooling = {
  /** Of least AICc. */
  preferred: CoolingModel;
  /** AICc of each model tried less that of the preferred one. */
  aiccDifferences: Partial<Record<CoolingModel, number>>;
  /** The return, as fitted in the better of the two models that have one; its amplitude is at 0 s. */
  transient?: { amplitude: number; amplitudeU: number; tauS: number; tauU: number; isSignificant: boolean };
  /** Values per second within a phase, of the better of the two models that have one. */
  line: { perS: number; u: number };
  /** How many repeats to leave out; none needed where no return was found. */
  discard: Discard;
  /** Phases and repeats used. */
  phases: number;
  n: number;
};

/** Fewest values in a phase that counts, and in all. */
const fewestInPhase = 5;
const fewestValues = 10;

/** Together beyond this, later phases are not looked at. */
const mostValues = 3000;

/** An amplitude this many standard uncertainties from 0 is significant, where AICc has preferred it besides. */
const significant = 3;

/**
 * Cooling after drying: the exponential return within phases, told from drift.
 *
 *   y = a_phase + d t + A exp(−t/τ)
 *
 * without either, with the line, with the return, with both; level of each phase its own, d, A and τ common to all, noise of
 * unknown kind. AICc chooses. Several phases together show a return that is lost in the noise of one.
 *
 * @param phases Repeats that count, times in seconds rising within a phase, all finite. Phases below five values are
 *   passed over, of longer ones the first 300 are used; at most 3 000 in all.
 * @param tolerance What the return may leave in a phase value, in the unit of the values; by default a third of the
 *   standard error of a phase mean in white noise.
 * @returns Amplitude and line in units of the values. Undefined below ten values.
 * @throws RangeError if lengths differ, times do not rise, or a value is not finite.
 *
 * τ is sought between half the median spacing and half the longest phase: beyond, the return is a line. Its uncertainty
 * is that of the linearised fit. Sources as `glsFit`; thresholds are our choice.
 */
export function coolingAfterDrying(phases: readonly CoolingPhase[], { tolerance }: { tolerance?: number } = {}): Cooling | undefined {
  const used = usable(phases);
  const n = used.reduce((sum, { values }) => sum + values.length, 0);
  if (n < fewestValues) return undefined;

  const times = used.map(({ sinceDryS }) => sinceDryS);
  const problem = { noise: whiteners(times), values: differencesWithin(used.map(({ values }) => values)) };
  const columnOf = (of: (t: number) => number) => differencesWithin(times.map((t) => t.map(of)));
  const line = columnOf((t) => t);
  const models: Partial<Record<CoolingModel, GlsFit>> = { none: glsFit({ ...problem, columns: [] }), line: glsFit({ ...problem, columns: [line] }) };

  const spacing = median(differencesWithin(times));
  const longest = times.reduce((most, t) => Math.max(most, t[t.length - 1] - t[0]), 0);
  const ends = { low: Math.log(spacing / 2), high: Math.log(longest / 2) };
  const taus: Partial<Record<CoolingModel, number>> = {};
  const isExact = Object.values(models).some(({ aicc }) => aicc === -Infinity);
  for (const [model, columns] of isExact ? [] : ([["exponential", []], ["exponential and line", [line]]] as const)) {
    const misfit = columnSearch({ ...problem, columns });
    const returnAt = (logTau: number) => columnOf((t) => Math.exp(-t / Math.exp(logTau)));
    const logTau = leastBetween((at) => misfit([returnAt(at)]), { ...ends, gridPoints: 24, width: 1e-4 });
    if (logTau - ends.low < 0.01 || ends.high - logTau < 0.01) continue;
    taus[model] = Math.exp(logTau);
    models[model] = glsFit({ ...problem, columns: [...columns, returnAt(logTau)], extraUnknowns: 1 });
  }

  const preferred = leastAicc(models, Object.keys(models) as CoolingModel[]);
  const returning = leastAicc(models, Object.keys(taus) as CoolingModel[]);
  const transient = returning && transientOf({ problem, columnOf, line, model: returning, tauS: taus[returning] ?? NaN, isPreferred: preferred === returning });
  const lineFit = models["exponential and line"] && models["exponential and line"].aicc < (models.line?.aicc ?? Infinity) ? models["exponential and line"] : models.line;
  return {
    preferred: preferred ?? "none",
    aiccDifferences: Object.fromEntries(Object.entries(models).map(([model, { aicc }]) => [model, aicc - (preferred ? (models[preferred]?.aicc ?? NaN) : NaN)])),
    transient,
    line: { perS: lineFit?.coefficients[0] ?? NaN, u: Math.sqrt(lineFit?.covariance[0] ?? NaN) },
    discard: discardFor(used, { transient: transient?.isSignificant ? transient : undefined, tolerance }),
    phases: used.length,
    n,
  };
}

function usable(phases: readonly CoolingPhase[]): CoolingPhase[] {
  const used: CoolingPhase[] = [];
  let total = 0;
  for (const { sinceDryS, values } of phases) {
    if (sinceDryS.length !== values.length) throw new RangeError("times and values must be equally many");
    if (!sinceDryS.every(Number.isFinite) || !values.every(Number.isFinite)) throw new RangeError("a value is not finite");
    const length = Math.min(values.length, longestWhitened);
    if (length < fewestInPhase || total + length > mostValues) continue;
    total += length;
    used.push({ sinceDryS: sinceDryS.subarray(0, length), values: values.subarray(0, length) });
  }
  return used;
}

function leastAicc(models: Partial<Record<CoolingModel, GlsFit>>, among: readonly CoolingModel[]): CoolingModel | undefined {
  return among.reduce<CoolingModel | undefined>((best, model) => (best === undefined || (models[model]?.aicc ?? Infinity) < (models[best]?.aicc ?? Infinity) ? model : best), undefined);
}

/** Amplitude and τ with the uncertainty of both together: the fit's column by τ is its tangent. */
function transientOf({
  problem,
  columnOf,
  line,
  model,
  tauS,
  isPreferred,
}: {
  problem: Pick<Parameters<typeof glsFit>[0], "noise" | "values">;
  columnOf: (of: (t: number) => number) => Float64Array;
  line: Float64Array;
  model: CoolingModel;
  tauS: number;
  isPreferred: boolean;
}): NonNullable<Cooling["transient"]> {
  const others = model === "exponential and line" ? [line] : [];
  const place = others.length;
  const columns = [...others, columnOf((t) => Math.exp(-t / tauS))];
  const amplitude = glsFit({ ...problem, columns }).coefficients[place];
  const tangent = columnOf((t) => (amplitude * t * Math.exp(-t / tauS)) / tauS ** 2);
  const { covariance } = glsFit({ ...problem, columns: [...columns, tangent] });
  const uAt = (j: number) => Math.sqrt(covariance[j * (columns.length + 2)]);
  const amplitudeU = uAt(place);
  return { amplitude, amplitudeU, tauS, tauU: uAt(place + 1), isSignificant: isPreferred && Math.abs(amplitude) > significant * amplitudeU };
}
