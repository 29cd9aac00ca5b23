import type { Selection } from "@/lib/analysis/schema";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { columnsOf, decodeColumns, type PhaseColumns, type Repeat } from "@/lib/phases/columns";
import { markLeftOut } from "@/lib/phases/summarise";

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
  closed: boolean;
};

/** The fit run a question is about: the named one of this campaign, else the current. Undefined before the campaign has started. */
export async function findFitRun(campaignId: string, fitRunId?: string): Promise<string | undefined> {
  const campaign = await row(`select id from campaign where id = $1`, [campaignId]);
  if (!campaign) throw notFound("campaign");
  const run = await row<{ id: string }>(
    `select id from fit_run where campaign_id = $1 and case when $2::bigint is null then current else id = $2 end`,
    [campaignId, fitRunId ?? null],
  );
  if (!run && fitRunId) throw notFound("fit run of this campaign");
  return run?.id;
}

/** Phases of a selection in order, without their repeats. */
export function selectPhases(campaignId: string, fitRunId: string, { medium, setPointC, mountId, cycles }: Selection): Promise<SelectedPhase[]> {
  return rows<SelectedPhase>(
    `select p.id as "phaseId", p.step_id as "stepId", p.sequence, p.cycle, p.medium, p.role, p.set_point_c as "setPointC", p.mount_id as "mountId",
            p.discard, p.started_at as "startedAt", s.f0_mean as "f0Mean", s.f0_u as "f0U", s.q_mean as "qMean", s.q_u as "qU",
            s.phase_id is not null as closed
       from phase p left join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
      where p.campaign_id = $1 and ($3::text is null or p.medium = $3) and ($4::float8 is null or p.set_point_c = $4)
        and ($5::bigint is null or p.mount_id = $5) and ($6::int is null or p.cycle between $6 and $7)
      order by p.sequence`,
    [campaignId, fitRunId, medium ?? null, setPointC ?? null, mountId ?? null, cycles?.from ?? null, cycles?.to ?? null],
  );
}

/** The repeats of phases: closed ones from their compact columns, the one under way from its rows. One query for each kind. */
export async function loadColumns(phases: readonly SelectedPhase[], fitRunId: string): Promise<Map<string, PhaseColumns>> {
  const closed = phases.filter((phase) => phase.closed).map(({ phaseId }) => phaseId);
  const stored = await rows<{ phaseId: string; columns: Buffer }>(
    `select phase_id as "phaseId", columns from phase_summary where fit_run_id = $1 and phase_id = any($2)`,
    [fitRunId, closed],
  );
  const columns = new Map(stored.map(({ phaseId, columns: bytes }) => [phaseId, decodeColumns(bytes)]));
  for (const phase of phases) if (!phase.closed) columns.set(phase.phaseId, await readOpenPhase(phase, fitRunId));
  return columns;
}

async function readOpenPhase({ stepId, discard }: SelectedPhase, fitRunId: string): Promise<PhaseColumns> {
  const readings = await rows<Repeat & { excluded: boolean }>(
    `select r.idx, r.at, f.f0_hz as "f0Hz", f.q, f.f0_std_hz as "f0StdHz", r.temperature_c as "temperatureC", f.flags,
            exists (select 1 from exclusion e where e.step_id = r.step_id and e.idx = r.idx and e.undone_at is null) as excluded
       from reading r cross join lateral (select * from fit where fit_run_id = $2 and step_id = $1 and idx = r.idx offset 0) f
      where r.step_id = $1 order by r.idx`,
    [stepId, fitRunId],
  );
  const columns = columnsOf(readings);
  markLeftOut(columns, { discard, excluded: new Set(readings.filter(({ excluded }) => excluded).map(({ idx }) => idx)) });
  return columns;
}
