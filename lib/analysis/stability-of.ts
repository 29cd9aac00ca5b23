import { loadRepeats } from "@/lib/analysis/load-repeats";
import type { StabilityAnswer, StabilityQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { stretches } from "@/lib/numerics/stability/stretches";

type Given = { phases: readonly SelectedPhase[]; fitRunId: string; query: StabilityQuery };

type Series = { atS: Float64Array; values: Float64Array; leftOut: Uint8Array; used: string };

export const stabilityUnit = ({ quantity, normalise }: StabilityQuery): string => (normalise === "absolute" && quantity === "f0" ? "Hz" : "1");

export const noStability = (query: StabilityQuery, used: string): StabilityAnswer => ({ tau0S: null, unit: stabilityUnit(query), reference: null, points: [], used });

/** The stability curve of phases of one medium and set-point, about the mean of what counts. */
export async function stabilityOf({ phases, fitRunId, query }: Given): Promise<StabilityAnswer> {
  const { quantity, view, normalise, statistic, taus, confidence } = query;
  const { atS, values, leftOut, used } = view === "within" ? await repeats(phases, fitRunId, quantity) : phaseValues(phases, quantity);
  const reference = meanOf(values, leftOut);
  if (reference === undefined) return noStability(query, `${used}; at least three values are needed`);

  const y = values.map((value) => (normalise === "fractional" ? value / reference - 1 : value - reference));
  const split = stretches({ atS, y, leftOut });
  const { points } = stabilityCurve({ stretches: split.stretches, tau0S: split.tau0S, statistic, taus, confidence });
  const holes = split.stretches.length === 1 ? "in one stretch" : `in ${split.stretches.length} stretches; no term reaches across a hole`;
  return { tau0S: split.tau0S, unit: stabilityUnit(query), reference, points, used: `${used}, ${holes}` };
}

/** Undefined below three values that count. */
function meanOf(values: Float64Array, leftOut: Uint8Array): number | undefined {
  let n = 0;
  let mean = 0;
  for (let i = 0; i < values.length; i++) if (!leftOut[i]) mean += (values[i] - mean) / ++n;
  return n < 3 ? undefined : mean;
}

async function repeats(phases: readonly SelectedPhase[], fitRunId: string, quantity: "f0" | "q"): Promise<Series> {
  const parts = [];
  let n = 0;
  for await (const { repeats: part } of loadRepeats(phases, { fitRunId, quantity })) {
    parts.push(part);
    n += part.n;
  }
  const atS = new Float64Array(n);
  const values = new Float64Array(n);
  const leftOut = new Uint8Array(n);
  let i = 0;
  let out = 0;
  let latest = -Infinity;
  for (const part of parts) {
    values.set(part.values, i);
    for (let j = 0; j < part.n; j++, i++) {
      latest = Math.max(latest, part.at[j] / 1000);
      atS[i] = latest;
      leftOut[i] = part.leftOut[j] || !Number.isFinite(part.values[j]) ? 1 : 0;
      out += leftOut[i];
    }
  }
  return { atS, values, leftOut, used: `${n - out} repeats of ${phases.length} phases${out > 0 ? `, ${out} left out` : ""}` };
}

/**
 * One value a cycle, of the role that decides in the medium: references in air, samples in a liquid. Missing cycles are holes,
 * and so is a re-mount: what the clamping changed is no instability of the sensor.
 */
function phaseValues(phases: readonly SelectedPhase[], quantity: "f0" | "q"): Series {
  const role = phases.some((phase) => phase.role === "reference") ? "reference" : "sample";
  const byCycle = new Map<number, SelectedPhase>();
  for (const phase of phases) if (phase.role === role && phase.f0Mean !== null && phase.startedAt) byCycle.set(phase.cycle, phase);
  const kept = [...byCycle.values()].sort((a, b) => a.sequence - b.sequence);
  const places = kept.flatMap((phase, i) => (i > 0 && phase.mountId !== kept[i - 1].mountId ? [{ phase, isHole: true }, { phase, isHole: false }] : [{ phase, isHole: false }]));
  const mounts = places.length - kept.length + 1;
  return {
    atS: Float64Array.from(places, ({ phase }) => (phase.startedAt as Date).getTime() / 1000),
    values: Float64Array.from(places, ({ phase }) => (quantity === "f0" ? phase.f0Mean : phase.qMean) as number),
    leftOut: Uint8Array.from(places, ({ isHole }) => (isHole ? 1 : 0)),
    used: `${kept.length} phase values, one a cycle, of the ${role}s${mounts > 1 ? ` under ${mounts} mounts` : ""}`,
  };
}
