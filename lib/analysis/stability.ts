import { heavy, type StabilityInput } from "@/lib/analysis/heavy";
import { loadRepeats } from "@/lib/analysis/load-repeats";
import { offLoop } from "@/lib/analysis/off-loop";
import { resultOf } from "@/lib/analysis/results";
import type { StabilityAnswer, StabilityQuery } from "@/lib/analysis/schema";
import { findFitRun, selectPhases, type SelectedPhase } from "@/lib/analysis/select-phases";
import { impossible } from "@/lib/errors";

const nothing = (unit: string, used: string): StabilityAnswer => ({ tau0S: null, unit, reference: null, points: [], used });

type Series = Pick<StabilityInput, "atS" | "values" | "leftOut"> & { used: string };

/** Values times averaging factors that are done in a few milliseconds here; more go to another process. */
const MOST_HERE = 300_000;

/**
 * Stability of f0 or Q, over repeats within phases or over phase values from cycle to cycle. The phase under way comes in when
 * it closes, unless it is the only one: an answer then stands, and is kept, until the next phase closes.
 */
export async function readStability(campaignId: string, query: StabilityQuery, { background = false } = {}): Promise<StabilityAnswer> {
  const { quantity, view, normalise } = query;
  const unit = normalise === "fractional" ? "1" : quantity === "f0" ? "Hz" : "1";
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return nothing(unit, "Nothing has been measured yet");
  const phases = oneSetPoint(await selectPhases(campaignId, fitRunId, { ...query, medium: query.medium ?? "air" }), query.setPointC);
  const closed = phases.filter((phase) => phase.closed);

  const compute = async (from: readonly SelectedPhase[]): Promise<StabilityAnswer> => {
    const series = view === "within" ? await repeats(from, fitRunId, quantity) : phaseValues(from, quantity);
    const { used } = series;
    const curve = await curveOf(series, query);
    if (!curve) return nothing(unit, `${used}; at least three values are needed`);
    const { tau0S, reference, points, stretches } = curve;
    const holes = stretches === 1 ? "in one stretch" : `in ${stretches} stretches; no term reaches across a hole`;
    return { tau0S, unit, reference, points, used: `${used}, ${holes}` };
  };
  if (closed.length === 0) return compute(phases);
  return resultOf({ campaignId, question: { kind: "stability", query }, fitRunId, phases: closed, background, compute: () => compute(closed) });
}

function curveOf({ used: _used, ...series }: Series, { statistic, taus, confidence, normalise }: StabilityQuery) {
  const input = { ...series, normalise, statistic, taus, confidence };
  const n = series.values.length;
  const factors = taus === "all" ? Math.min(n / 2, 2000) : Math.log2(n + 1);
  return n * factors <= MOST_HERE ? heavy.stability(input) : offLoop("stability", input);
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
