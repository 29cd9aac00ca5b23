import type { StabilityAnswer, StabilityQuery } from "@/lib/analysis/schema";
import { findFitRun, loadColumns, selectPhases, type SelectedPhase } from "@/lib/analysis/select-phases";
import { impossible } from "@/lib/errors";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { stretches } from "@/lib/numerics/stability/stretches";

const nothing = (unit: string, used: string): StabilityAnswer => ({ tau0S: null, unit, reference: null, points: [], used });

type Series = { atS: Float64Array; values: Float64Array; leftOut: Uint8Array; used: string };

/** Stability of f0 or Q, over repeats within phases or over phase values from cycle to cycle. */
export async function readStability(campaignId: string, query: StabilityQuery): Promise<StabilityAnswer> {
  const { quantity, statistic, view, taus, confidence, normalise } = query;
  const unit = normalise === "fractional" ? "1" : quantity === "f0" ? "Hz" : "1";
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return nothing(unit, "Nothing has been measured yet");
  const phases = oneSetPoint(await selectPhases(campaignId, fitRunId, { ...query, medium: query.medium ?? "air" }), query.setPointC);
  const series = view === "within" ? await repeats(phases, fitRunId, quantity) : phaseValues(phases, quantity);

  const counted = series.values.filter((_, i) => !series.leftOut[i]);
  if (counted.length < 3) return nothing(unit, `${series.used}; at least three values are needed`);
  const reference = counted.reduce((sum, value) => sum + value, 0) / counted.length;
  const y = series.values.map((value) => (normalise === "fractional" ? value / reference - 1 : value - reference));
  const split = stretches({ atS: series.atS, y, leftOut: series.leftOut });
  const { points } = stabilityCurve({ stretches: split.stretches, tau0S: split.tau0S, statistic, taus, confidence });
  const holes = split.stretches.length === 1 ? "in one stretch" : `in ${split.stretches.length} stretches; no term reaches across a hole`;
  return { tau0S: split.tau0S, unit, reference, points, used: `${series.used}, ${holes}` };
}

/** A series belongs to one set-point; with several in the selection the question has to name one. */
function oneSetPoint(phases: readonly SelectedPhase[], setPointC: number | undefined): SelectedPhase[] {
  const setPoints = new Set(phases.map((phase) => phase.setPointC));
  if (setPointC === undefined && setPoints.size > 1) {
    const list = [...setPoints].map((c) => (c === null ? "none" : `${c} °C`)).join(", ");
    throw impossible(`This campaign was measured at several set-points (${list}); name one with setPointC`, {
      errors: [{ path: "setPointC", message: "is needed" }],
    });
  }
  return [...phases];
}

async function repeats(phases: readonly SelectedPhase[], fitRunId: string, quantity: "f0" | "q"): Promise<Series> {
  const columns = await loadColumns(phases, fitRunId);
  const n = phases.reduce((sum, { phaseId }) => sum + (columns.get(phaseId)?.n ?? 0), 0);
  const atS = new Float64Array(n);
  const values = new Float64Array(n);
  const leftOut = new Uint8Array(n);
  let i = 0;
  let latest = -Infinity;
  for (const { phaseId } of phases) {
    const phase = columns.get(phaseId);
    if (!phase) continue;
    const of = quantity === "f0" ? phase.f0Hz : phase.q;
    for (let j = 0; j < phase.n; j++, i++) {
      latest = Math.max(latest, phase.at[j] / 1000);
      atS[i] = latest;
      values[i] = of[j];
      leftOut[i] = phase.leftOut[j] || !Number.isFinite(of[j]) ? 1 : 0;
    }
  }
  const out = leftOut.reduce((sum, mark) => sum + mark, 0);
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
