import type { Selection } from "@/lib/analysis/schema";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";

export type SelectedPhase = {
  phaseId: string;
  stepId: string;
  sequence: number;
  cycle: number;
  medium: string;
  role: "reference" | "check" | "sample";
  setPointC: number | null;
  mountId: string | null;
  discard: number;
  startedAt: Date | null;
  f0Mean: number | null;
  f0U: number | null;
  qMean: number | null;
  qU: number | null;
  /** Thermometer's mean over the phase and the standard deviation about it, °C. */
  temperatureC: number | null;
  temperatureSd: number | null;
  closed: boolean;
  /** How many repeats a closed phase has. */
  n: number | null;
  /** Null also for a phase that was closed by a version without them. */
  earliestAt: Date | null;
  latestAt: Date | null;
};

/** The fit run a question is about: the named one of this campaign, else the current. Undefined before the campaign has started. */
export async function findFitRun(campaignId: string, fitRunId?: string): Promise<string | undefined> {
  const found = await row<{ id: string | null }>(
    `select (select r.id from fit_run r where r.campaign_id = c.id and case when $2::bigint is null then r.current else r.id = $2 end) as id from campaign c where c.id = $1`,
    [campaignId, fitRunId ?? null],
  );
  if (!found) throw notFound("campaign");
  if (!found.id && fitRunId) throw notFound("fit run of this campaign");
  return found.id ?? undefined;
}

const SELECTED = `
       from phase p left join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
      where p.campaign_id = $1 and ($3::text is null or p.medium = $3) and ($4::float8 is null or p.set_point_c = $4)
        and ($5::bigint is null or p.mount_id = $5) and ($6::int is null or p.cycle between $6 and $7)`;

const bindOf = (campaignId: string, fitRunId: string, { medium, setPointC, mountId, cycles }: Selection) => [
  campaignId, fitRunId, medium ?? null, setPointC ?? null, mountId ?? null, cycles?.from ?? null, cycles?.to ?? null,
];

/** Phases of a selection in order, without their repeats. */
export function selectPhases(campaignId: string, fitRunId: string, selection: Selection): Promise<SelectedPhase[]> {
  return rows<SelectedPhase>(
    `select p.id as "phaseId", p.step_id as "stepId", p.sequence, p.cycle, p.medium, p.role, p.set_point_c as "setPointC", p.mount_id as "mountId",
            p.discard, p.started_at as "startedAt", s.f0_mean as "f0Mean", s.f0_u as "f0U", s.q_mean as "qMean", s.q_u as "qU",
            s.temperature_mean as "temperatureC", s.temperature_sd as "temperatureSd", s.phase_id is not null as closed, s.n, s.earliest_at as "earliestAt", s.latest_at as "latestAt"
       ${SELECTED} order by p.sequence`,
    bindOf(campaignId, fitRunId, selection),
  );
}

export type SelectedContent = {
  closed: number;
  setPointsC: (number | null)[];
  /** SHA-256 of the values and repeats of the closed phases; null without any. */
  content: Buffer | null;
};

/**
 * What a selection is made of, in one row: equal contents are equal phases with equal repeats and the same exclusions, those of
 * repeats that do not count anyway included.
 */
export async function contentOf(campaignId: string, fitRunId: string, selection: Selection): Promise<SelectedContent> {
  const found = await row<SelectedContent>(
    `select count(s.phase_id)::int as closed, coalesce(array_agg(distinct p.set_point_c), '{}') as "setPointsC",
            sha256(convert_to(string_agg(row(p.id, coalesce(s.digest, sha256(s.columns)), s.f0_mean, s.f0_u, s.q_mean, s.q_u,
                                   (select string_agg(e.idx::text, ',' order by e.idx) from exclusion e where e.step_id = p.step_id and e.undone_at is null))::text, ' ' order by p.sequence)
                                filter (where s.phase_id is not null), 'UTF8')) as content
       ${SELECTED}`,
    bindOf(campaignId, fitRunId, selection),
  );
  return found ?? { closed: 0, setPointsC: [], content: null };
}
