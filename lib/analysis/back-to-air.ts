import type { BackToAirAnswer } from "@/lib/analysis/schema";
import { loadRepeats } from "@/lib/analysis/load-repeats";
import { findFitRun, selectPhases } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { readAirReturns } from "@/lib/phases/air-returns";
import { courseOf } from "@/lib/phases/levels";

/** How the air reference came back after each clean: its deviation from the baseline of its mount and set-point, and its course within the phase. */
export async function readBackToAir(campaignId: string): Promise<BackToAirAnswer> {
  const fitRunId = await findFitRun(campaignId);
  const [found, before, limits, courses] = await Promise.all([
    readAirReturns([campaignId]),
    rows<{ sequence: number; after: string | null }>(
      // Air phases since a liquid share its number; what it was stands beside them.
      `with run as (select medium, sequence, count(*) filter (where medium <> 'air') over (order by sequence) as liquids from phase where campaign_id = $1)
       select air.sequence, liquid.medium as after from run air left join run liquid on liquid.liquids = air.liquids and liquid.medium <> 'air' where air.medium = 'air'`,
      [campaignId],
    ),
    rows<{ ppm: number }>(
      `select (l->>'tolerancePpm')::float8 as ppm from campaign c join protocol_version v on v.id = c.protocol_version_id,
              jsonb_array_elements(v.definition->'limits') l where c.id = $1 and l->>'kind' = 'return' and l ? 'tolerancePpm'`,
      [campaignId],
    ),
    fitRunId ? readCourses(campaignId, fitRunId) : new Map<string, (number | null)[]>(),
  ]);
  const afterOf = new Map(before.map(({ sequence, after }) => [sequence, after]));
  return {
    baselineHz: found.at(-1)?.baselineHz ?? null,
    limitPpm: limits[0]?.ppm ?? null,
    items: found.map(({ baselineQ, at, shiftU, campaignId: _campaign, ...phase }) => {
      const { baselineHz, f0Hz } = phase;
      return {
        ...phase,
        at: at.toISOString(),
        after: afterOf.get(phase.sequence) ?? null,
        shiftPpm: baselineHz === null ? null : (f0Hz / baselineHz - 1) * 1e6,
        shiftU: baselineHz === null || shiftU === null ? null : (shiftU / baselineHz) * 1e6,
        qShiftPercent: baselineQ === null || phase.q === null ? null : (phase.q / baselineQ - 1) * 100,
        courseMHz: (courses.get(phase.phaseId) ?? []).map((mean) => (mean === null ? null : (mean - f0Hz) * 1000)),
      };
    }),
  };
}

/** f0 in the course of each air phase; from the repeats where a version that kept no course closed it. */
async function readCourses(campaignId: string, fitRunId: string): Promise<Map<string, (number | null)[]>> {
  const stored = await rows<{ phaseId: string; course: (number | null)[] | null }>(
    `select p.id as "phaseId", s.course from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2 where p.campaign_id = $1 and p.medium = 'air'`,
    [campaignId, fitRunId],
  );
  const courses = new Map(stored.map(({ phaseId, course }) => [phaseId, course ?? []]));
  if (stored.every(({ course }) => course)) return courses;

  const without = new Set(stored.filter(({ course }) => !course).map(({ phaseId }) => phaseId));
  const unfilled = (await selectPhases(campaignId, fitRunId, { medium: "air" })).filter(({ phaseId }) => without.has(phaseId));
  for await (const { phase, repeats } of loadRepeats(unfilled, { fitRunId, quantity: "f0" })) courses.set(phase.phaseId, courseOf(repeats.values));
  return courses;
}
