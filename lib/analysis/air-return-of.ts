import { loadMarks } from "@/lib/analysis/load-marks";
import { loadRepeats } from "@/lib/analysis/load-repeats";
import type { AirReturnAnswer } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import type { Before } from "@/lib/numerics/drift/air-references";
import { judgeAirReturn } from "@/lib/numerics/drift/air-return";
import { coolingAfterDrying, type CoolingPhase } from "@/lib/numerics/drift/cooling";
import { LEFT_OUT } from "@/lib/numerics/resonance/flags";

const DAY_MS = 86_400_000;
/** More references than the judgement takes; the newest are kept. */
const MOST_REFERENCES = 3000;
/** Phases looked at for cooling: the fit takes no more repeats than these hold. */
const MOST_COOLING = 60;
/** References whose mean the shifts are about. */
const FIRST = 3;

type Given = { campaignId: string; fitRunId: string; phases: readonly SelectedPhase[] };

type Reference = SelectedPhase & { startedAt: Date; f0Mean: number; qMean: number };

export const noAirReturn: AirReturnAnswer = {
  verdict: "too few",
  n: 0,
  growth: null,
  steps: [],
  cleanedAgain: { times: 0, takesOff: "untried", share: null, shareU: null },
  cooling: null,
  used: "no air reference has ended yet",
};

/** The judgement about air references of one set-point, and cooling within them. */
export async function airReturnOf({ campaignId, fitRunId, phases }: Given): Promise<AirReturnAnswer> {
  const all = phases.filter((phase): phase is Reference => phase.role === "reference" && phase.f0Mean !== null && phase.qMean !== null && phase.startedAt !== null);
  const setPointC = all[all.length - 1]?.setPointC;
  const references = all.filter((phase, i) => phase.setPointC === setPointC && (i === 0 || phase.startedAt > all[i - 1].startedAt)).slice(-MOST_REFERENCES);
  if (references.length === 0) return noAirReturn;

  const steps = await rows<{ sequence: number; kind: string; medium: string | null; endedAt: Date | null }>(
    `select sequence, kind, medium, coalesce(ended_clock, closed_at) as "endedAt" from step where campaign_id = $1 and kind in ('measure', 'fill', 'dry') order by sequence`,
    [campaignId],
  );
  const base = references.slice(0, FIRST);
  const mean = (of: (phase: Reference) => number) => base.reduce((sum, phase) => sum + of(phase) / base.length, 0);
  const [baselineHz, baselineQ] = [mean(({ f0Mean }) => f0Mean), mean(({ qMean }) => qMean)];
  const [{ startedAt: first }] = references;
  const judged = judgeAirReturn({
    atDays: Float64Array.from(references, ({ startedAt }) => (startedAt.getTime() - first.getTime()) / DAY_MS),
    f0Ppm: Float64Array.from(references, ({ f0Mean }) => (f0Mean / baselineHz - 1) * 1e6),
    qPercent: Float64Array.from(references, ({ qMean }) => (qMean / baselineQ - 1) * 100),
    before: beforeOf(references, steps),
    baselineQ,
  });
  const { growth, cleanedAgain, verdict, n } = judged;
  const at = setPointC === null ? "" : ` at ${setPointC} °C`;
  return {
    verdict,
    n,
    growth: growth
      ? {
          f0PpmPerDay: growth.f0PpmPerDay,
          f0U: growth.f0U,
          qPercentPerDay: growth.qPercentPerDay,
          qU: growth.qU,
          totalPpm: growth.totalPpm,
          lossFactor: finite(growth.lossFactor),
          lossFactorU: finite(growth.lossFactorU),
          q: growth.q,
        }
      : null,
    steps: judged.steps.map(({ index, atDays: _atDays, ...step }) => ({ at: references[index].startedAt.toISOString(), ...step })),
    cleanedAgain: { times: cleanedAgain.times, takesOff: cleanedAgain.takesOff, share: finite(cleanedAgain.share), shareU: finite(cleanedAgain.shareU) },
    cooling: await coolingOf(references.slice(0, MOST_COOLING), fitRunId, steps.filter(({ kind }) => kind === "dry")),
    used: `${references.length} air references${at}${verdict === "too few" ? "; at least ten after ordinary cleans are needed" : ""}`,
  };
}

const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** A reference with no liquid in the cell since the one before was preceded by cleaning once more. */
function beforeOf(references: readonly Reference[], steps: readonly { sequence: number; kind: string; medium: string | null }[]): Before[] {
  const liquids = steps.filter(({ kind, medium }) => kind === "fill" || (medium !== null && medium !== "air")).map(({ sequence }) => sequence);
  return references.map(({ sequence, mountId }, i) => {
    const earlier = references[i - 1];
    if (!earlier) return "clean";
    if (mountId !== earlier.mountId) return "remount";
    return liquids.some((liquid) => liquid > earlier.sequence && liquid < sequence) ? "clean" : "cleanAgain";
  });
}

/** Discarded repeats are in it: how many to discard is the question. */
async function coolingOf(phases: readonly Reference[], fitRunId: string, dries: readonly { sequence: number; endedAt: Date | null }[]): Promise<AirReturnAnswer["cooling"]> {
  const marks = await loadMarks(phases, fitRunId);
  const given: CoolingPhase[] = [];
  for await (const { phase, repeats } of loadRepeats(phases, { fitRunId, quantity: "f0" })) {
    const own = marks.get(phase.phaseId);
    const dried = dries.findLast(({ sequence, endedAt }) => sequence < phase.sequence && endedAt !== null && endedAt.getTime() <= repeats.at[0])?.endedAt?.getTime() ?? repeats.at[0];
    const times: number[] = [];
    const values: number[] = [];
    for (let i = 0; i < repeats.n; i++) {
      const since = (repeats.at[i] - dried) / 1000;
      if (own?.excluded[i] || (own && own.flags[i] & LEFT_OUT) || !Number.isFinite(repeats.values[i]) || !(since > (times[times.length - 1] ?? -Infinity))) continue;
      times.push(since);
      values.push(repeats.values[i]);
    }
    given.push({ sinceDryS: Float64Array.from(times), values: Float64Array.from(values) });
  }
  const found = coolingAfterDrying(given);
  if (!found) return null;
  const { preferred, transient, discard, phases: used, n } = found;
  return { preferred, transient: transient ? { ...transient } : null, discard: { ...discard, repeats: discard.repeats ?? null }, phases: used, n };
}
