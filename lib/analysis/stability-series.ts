import { loadMarks } from "@/lib/analysis/load-marks";
import { loadRepeats } from "@/lib/analysis/load-repeats";
import type { StabilityQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { row } from "@/lib/db";
import { flagBits } from "@/lib/numerics/resonance/flags";
import { usedReadings, type UsedReadings } from "@/lib/numerics/stability/used-readings";

/** A series in time with what does not count; `temperatureC` as long as the values where it was asked for. */
export type Series = {
  atS: Float64Array;
  values: Float64Array;
  leftOut: Uint8Array;
  temperatureC?: Float64Array;
  used: string;
  readings?: UsedReadings & { n: number };
};

type Load = { phases: readonly SelectedPhase[]; fitRunId: string; query: Pick<StabilityQuery, "quantity" | "leaveOut" | "compensate"> };

/** All repeats of phases, one after the other; what lies before an earlier one in time is taken at that time. */
export async function repeatsOf({ phases, fitRunId, query: { quantity, leaveOut, compensate } }: Load): Promise<Series> {
  const parts = [];
  let n = 0;
  for await (const { phase, repeats } of loadRepeats(phases, { fitRunId, quantity })) {
    parts.push({ phase, repeats });
    n += repeats.n;
  }
  const marks = await loadMarks(parts.map(({ phase }) => phase), fitRunId);
  const series = { atS: new Float64Array(n), values: new Float64Array(n), flags: new Uint16Array(n), discarded: new Uint8Array(n), excluded: new Uint8Array(n) };
  let i = 0;
  let latest = -Infinity;
  for (const { phase, repeats } of parts) {
    const own = marks.get(phase.phaseId);
    series.values.set(repeats.values, i);
    if (own) {
      series.flags.set(own.flags.subarray(0, repeats.n), i);
      series.discarded.set(own.discarded.subarray(0, repeats.n), i);
      series.excluded.set(own.excluded.subarray(0, repeats.n), i);
    }
    for (let j = 0; j < repeats.n; j++, i++) series.atS[i] = latest = Math.max(latest, repeats.at[j] / 1000);
  }
  const temperatureC = compensate === "temperature" ? await temperaturesOf(phases, fitRunId, n) : undefined;
  const { atS, values, flags, discarded, excluded } = series;
  const readings = usedReadings({ values, flags, discarded, excluded, leavesOut: flagBits(leaveOut) });
  const { leftOut, used } = readings;
  return { atS, values, leftOut, temperatureC, readings: { ...readings, n }, used: `${used} repeats of ${phases.length} phases${n > used ? `, ${n - used} left out` : ""}` };
}

async function temperaturesOf(phases: readonly SelectedPhase[], fitRunId: string, n: number): Promise<Float64Array> {
  const temperatureC = new Float64Array(n).fill(NaN);
  let i = 0;
  for await (const { repeats } of loadRepeats(phases, { fitRunId, quantity: "temperature" })) {
    temperatureC.set(repeats.values, i);
    i += repeats.n;
  }
  return temperatureC;
}

/**
 * One value a cycle, of the role that decides in the medium: references in air, samples in a liquid. Missing cycles are holes,
 * and so is a re-mount: what the clamping changed is no instability of the sensor.
 */
export function phaseValuesOf(phases: readonly SelectedPhase[], quantity: "f0" | "q"): Series {
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
    temperatureC: Float64Array.from(places, ({ phase }) => phase.temperatureC ?? NaN),
    used: `${kept.length} phase values, one a cycle, of the ${role}s${mounts > 1 ? ` under ${mounts} mounts` : ""}`,
  };
}

/** Phases and repeats in each that the length of a repeat is asked of. */
const PHASES_ASKED = 20;
const REPEATS_ASKED = 50;

/** Median time in which a repeat measures, s; undefined where the rig has not said. */
export async function repeatLength(phases: readonly SelectedPhase[]): Promise<number | undefined> {
  const every = Math.max(1, Math.ceil(phases.length / PHASES_ASKED));
  const steps = phases.filter((_, i) => i % every === 0).map(({ stepId }) => stepId);
  const found = await row<{ s: number | null }>(
    `select percentile_cont(0.5) within group (order by duration_s) as s from reading where step_id = any($1) and idx < ${REPEATS_ASKED} and duration_s > 0`,
    [steps],
  );
  return found?.s ?? undefined;
}
