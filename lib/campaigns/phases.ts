import { z } from "zod";
import type { PhaseItem, PhaseQuery } from "@/lib/campaigns/answers";
import { findFitRun } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";

type PhaseRecord = {
  id: string;
  cycle: number;
  sequence: number;
  medium: string;
  role: PhaseItem["role"];
  setPointC: number | null;
  mountId: string | null;
  startedAt: Date | null;
  endedAt: Date | null;
  n: number;
  nUsed: number;
  f0Mean: number | null;
  f0Sd: number | null;
  f0U: number | null;
  qMean: number | null;
  qSd: number | null;
  qU: number | null;
  temperatureMean: number | null;
  temperatureSd: number | null;
  flags: Record<string, number> | null;
};

/** Phases of a campaign in order; the one under way has no value yet. */
export async function findPhases({ campaignId, query }: { campaignId: string; query: PhaseQuery }): Promise<Page<PhaseItem>> {
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  const after = readCursor(query.cursor, z.tuple([z.int32()]))?.[0] ?? null;
  const found = await rows<PhaseRecord>(
    `select p.id, p.cycle, p.sequence, p.medium, p.role, p.set_point_c as "setPointC", p.mount_id as "mountId", p.started_at as "startedAt",
            p.ended_at as "endedAt", coalesce(s.n, st.stored)::int as n, coalesce(s.n_used, 0) as "nUsed", s.f0_mean as "f0Mean", s.f0_sd as "f0Sd",
            s.f0_u as "f0U", s.q_mean as "qMean", s.q_sd as "qSd", s.q_u as "qU", s.temperature_mean as "temperatureMean",
            s.temperature_sd as "temperatureSd", s.flag_counts as flags
       from phase p join step st on st.id = p.step_id left join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
      where p.campaign_id = $1 and ($3::text is null or p.medium = $3) and ($4::text is null or p.role = $4) and ($5::int is null or p.sequence > $5)
      order by p.sequence limit $6`,
    [campaignId, fitRunId ?? null, query.medium ?? null, query.role ?? null, after, query.limit + 1],
  );
  const page = cutPage(found, query.limit, ({ sequence }) => [sequence]);
  return { ...page, items: page.items.map(presentPhase) };
}

function presentPhase({ f0Mean, f0Sd, f0U, qMean, qSd, qU, temperatureMean, temperatureSd, startedAt, endedAt, flags, ...phase }: PhaseRecord): PhaseItem {
  return {
    ...phase,
    startedAt: startedAt?.toISOString() ?? null,
    endedAt: endedAt?.toISOString() ?? null,
    f0: { mean: f0Mean, sd: f0Sd, u: f0U },
    q: { mean: qMean, sd: qSd, u: qU },
    temperatureC: { mean: temperatureMean, sd: temperatureSd },
    flags: flags ?? {},
  };
}
