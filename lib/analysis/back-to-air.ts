import type { BackToAirAnswer } from "@/lib/analysis/schema";
import { findFitRun, loadColumns, selectPhases } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { readAirReturns } from "@/lib/phases/air-returns";
import type { PhaseColumns } from "@/lib/phases/columns";

const COURSE_POINTS = 24;

/** How the air reference came back after each clean: its deviation from the baseline of its mount and set-point, and its course within the phase. */
export async function readBackToAir(campaignId: string): Promise<BackToAirAnswer> {
  const fitRunId = await findFitRun(campaignId);
  const [found, before, limits, columns] = await Promise.all([
    readAirReturns([campaignId]),
    rows<{ sequence: number; after: string | null }>(
      `select p.sequence, (select q.medium from phase q where q.campaign_id = p.campaign_id and q.sequence < p.sequence and q.medium <> 'air' order by q.sequence desc limit 1) as after
         from phase p where p.campaign_id = $1 and p.medium = 'air'`,
      [campaignId],
    ),
    rows<{ ppm: number }>(
      `select (l->>'tolerancePpm')::float8 as ppm from campaign c join protocol_version v on v.id = c.protocol_version_id,
              jsonb_array_elements(v.definition->'limits') l where c.id = $1 and l->>'kind' = 'return' and l ? 'tolerancePpm'`,
      [campaignId],
    ),
    fitRunId ? selectPhases(campaignId, fitRunId, { medium: "air" }).then((phases) => loadColumns(phases, fitRunId)) : new Map<string, PhaseColumns>(),
  ]);
  const afterOf = new Map(before.map(({ sequence, after }) => [sequence, after]));
  return {
    baselineHz: found.at(-1)?.baselineHz ?? null,
    limitPpm: limits[0]?.ppm ?? null,
    items: found.map(({ baselineQ, at, shiftU, campaignId: _campaign, ...phase }) => {
      const { baselineHz } = phase;
      const repeats = columns.get(phase.phaseId);
      return {
        ...phase,
        at: at.toISOString(),
        after: afterOf.get(phase.sequence) ?? null,
        shiftPpm: baselineHz === null ? null : (phase.f0Hz / baselineHz - 1) * 1e6,
        shiftU: baselineHz === null || shiftU === null ? null : (shiftU / baselineHz) * 1e6,
        qShiftPercent: baselineQ === null || phase.q === null ? null : (phase.q / baselineQ - 1) * 100,
        courseMHz: repeats ? courseOf(repeats, phase.f0Hz) : [],
      };
    }),
  };
}

/** f0 less the phase value over the whole phase, those left out included: means of at most 24 equal parts, null where a part has no fit. */
function courseOf({ n, f0Hz }: PhaseColumns, phaseHz: number): (number | null)[] {
  const parts = Math.min(n, COURSE_POINTS);
  return Array.from({ length: parts }, (_, part) => {
    const fitted = f0Hz.subarray(Math.floor((part * n) / parts), Math.floor(((part + 1) * n) / parts)).filter(Number.isFinite);
    return fitted.length > 0 ? (fitted.reduce((sum, value) => sum + (value - phaseHz), 0) / fitted.length) * 1000 : null;
  });
}
