import { compensatedSeries, type CompensatedSeries } from "@/lib/analysis/compensated-series";
import type { StabilityAnswer, StabilityQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { phaseValuesOf, repeatLength, repeatsOf, type Series } from "@/lib/analysis/stability-series";
import { deviation } from "@/lib/numerics/stability/deviation";
import { noiseParts } from "@/lib/numerics/stability/noise-parts";
import { stabilityCurve, type StabilityPoint } from "@/lib/numerics/stability/stability-curve";
import { stretches } from "@/lib/numerics/stability/stretches";
import { withoutDeadTime } from "@/lib/numerics/stability/without-dead-time";

type Given = { phases: readonly SelectedPhase[]; fitRunId: string; query: StabilityQuery };

export const stabilityUnit = ({ quantity, normalise }: StabilityQuery): string => (normalise === "absolute" && quantity === "f0" ? "Hz" : "1");

export const noStability = (query: StabilityQuery, used: string): StabilityAnswer => ({ tau0S: null, unit: stabilityUnit(query), reference: null, points: [], used });

/** The stability curve of phases of one medium and set-point, about the mean of what counts. */
export async function stabilityOf({ phases, fitRunId, query }: Given): Promise<StabilityAnswer> {
  const { view, normalise, statistic, taus, confidence } = query;
  const within = view === "within";
  const measured = within ? await repeatsOf({ phases, fitRunId, query }) : phaseValuesOf(phases, query.quantity);
  const { series, compensation, sources }: CompensatedSeries = query.compensate === "temperature" ? compensatedSeries({ series: measured, phases, quantity: query.quantity }) : { series: measured, sources: [] };
  const about = { readings: readingsOf(series), ...(compensation && { compensation }) };
  const { atS, values, leftOut, used } = series;
  const reference = meanOf(values, leftOut);
  if (reference === undefined) return { ...noStability(query, `${used}; at least three values are needed`), ...about };

  const scale = normalise === "fractional" ? 1 / reference : 1;
  const y = values.map((value) => (normalise === "fractional" ? value / reference - 1 : value - reference));
  const split = stretches({ atS, y, leftOut });
  const curve = { stretches: split.stretches, tau0S: split.tau0S, confidence };
  const { points } = stabilityCurve({ ...curve, statistic, taus });
  const allan = statistic === "oadev" && taus === "octave" ? points : stabilityCurve({ ...curve, statistic: "oadev", taus: "octave" }).points;
  const repeatS = within ? await repeatLength(phases) : undefined;
  const dead = repeatS === undefined ? undefined : deadTimeOf({ points, allan, query, tau0S: split.tau0S, repeatS });
  const doubts = sources.map(({ sensitivity, u }) => ({ u: u * scale, parts: stretches({ atS, y: sensitivity, leftOut }).stretches }));
  const holes = split.stretches.length === 1 ? "in one stretch" : `in ${split.stretches.length} stretches; no term reaches across a hole`;
  return {
    tau0S: split.tau0S,
    unit: stabilityUnit(query),
    reference,
    points: (dead?.points ?? points).map((point) => (doubts.length > 0 ? { ...point, compensationU: doubtAt(doubts, query, point.m, split.tau0S) } : point)),
    used: `${used}, ${holes}`,
    ...about,
    parts: partsOf(dead?.allan ?? allan),
    deadTime: dead?.answer ?? null,
  };
}

function partsOf(points: readonly StabilityPoint[]): StabilityAnswer["parts"] {
  const parts = noiseParts(points);
  if (!parts) return null;
  const known = (u: number) => (Number.isFinite(u) ? u : null);
  const { white, flicker, randomWalk, driftPerS } = parts.u;
  return { ...parts, u: { white: known(white), flicker: known(flicker), randomWalk: known(randomWalk), driftPerS: known(driftPerS) } };
}

function readingsOf({ readings }: Series): StabilityAnswer["readings"] {
  if (!readings) return null;
  const { n, used, reasons, flaggedButUsed } = readings;
  return { n, used, reasons: { ...reasons } as Record<string, number>, flaggedButUsed: { ...flaggedButUsed } as Record<string, number> };
}

type Dead = { points: readonly StabilityPoint[]; allan: readonly StabilityPoint[]; query: StabilityQuery; tau0S: number; repeatS: number };

function deadTimeOf({ points, allan, query, tau0S, repeatS }: Dead): { answer: NonNullable<StabilityAnswer["deadTime"]>; points: readonly StabilityPoint[]; allan: readonly StabilityPoint[] } {
  const freed = withoutDeadTime({ points, statistic: query.statistic, tau0S, repeatS });
  const { r, deadShare, largestEffect, treatment } = freed;
  const answer = { repeatS, r, deadShare, largestEffect: Number.isFinite(largestEffect) ? largestEffect : null };
  if (query.deadTime === "stated" || treatment !== "corrected") return { answer: { ...answer, treatment: treatment === "corrected" ? "stated" : treatment }, points, allan };
  return { answer: { ...answer, treatment }, points: freed.points, allan: withoutDeadTime({ points: allan, statistic: "oadev", tau0S, repeatS }).points };
}

/** What errors of the compensation's common quantities can add to a deviation: that of their sensitivities, times their uncertainties. */
function doubtAt(doubts: readonly { u: number; parts: readonly Float64Array[] }[], { statistic }: StabilityQuery, m: number, tau0S: number): number {
  return Math.hypot(...doubts.map(({ u, parts }) => u * (deviation(statistic, parts, m)?.deviation ?? 0) * (statistic === "tdev" ? tau0S : 1)));
}

/** Undefined below three values that count. */
function meanOf(values: Float64Array, leftOut: Uint8Array): number | undefined {
  let n = 0;
  let mean = 0;
  for (let i = 0; i < values.length; i++) if (!leftOut[i]) mean += (values[i] - mean) / ++n;
  return n < 3 ? undefined : mean;
}
