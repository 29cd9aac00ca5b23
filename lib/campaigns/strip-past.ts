import type { StripSegment } from "@/lib/campaigns/strip-schema";
import { rows } from "@/lib/db";
import type { StepPlan } from "@/lib/protocol/types";

export type PastStep = {
  campaignId: string;
  kind: StepPlan["kind"];
  role: "reference" | "check" | "sample" | "find" | null;
  medium: string | null;
  slot: string | null;
  cycle: number;
  label: string;
  sequence: number;
  from: Date;
  /** Null while it is under way. */
  to: Date | null;
  repeats: number | null;
  stored: number;
  phaseId: string | null;
  f0Mean: number | null;
  f0U: number | null;
};

/** Steps that took time by the rig's clock, of all campaigns asked for, each campaign's in order. */
export const readPastSteps = (campaignIds: readonly string[]): Promise<PastStep[]> =>
  rows<PastStep>(
    `select s.campaign_id as "campaignId", s.kind, s.role, s.medium, s.slot, s.cycle, s.label, s.sequence, s.started_clock as "from",
            case when s.state in ('ready', 'out') then null else greatest(s.ended_clock, p.ended_at, s.started_clock) end as "to",
            (s.params->>'repeats')::int as repeats, s.stored, p.id as "phaseId", su.f0_mean as "f0Mean", su.f0_u as "f0U"
       from step s left join phase p on p.step_id = s.id
       left join fit_run r on r.campaign_id = s.campaign_id and r.current
       left join phase_summary su on su.phase_id = p.id and su.fit_run_id = r.id
      where s.campaign_id = any($1::bigint[]) and s.started_clock is not null and s.kind not in ('ask', 'settle') order by s.campaign_id, s.sequence`,
    [campaignIds],
  );

export function segmentKind(kind: StepPlan["kind"], medium: string | null): StripSegment["kind"] {
  if (kind === "measure") return medium === "air" ? "air" : "liquid";
  if (kind === "fill" || kind === "dry" || kind === "wait") return kind;
  return "clean";
}

/** A step as the strip draws it; one under way reaches to the clock. */
export function pastSegment({ kind, role, medium, slot, cycle, label, from, to, repeats, stored, phaseId, f0Mean, f0U }: PastStep, clock: Date): StripSegment {
  const of = medium ?? slot;
  return {
    kind: segmentKind(kind, medium),
    from: from.toISOString(),
    to: (to ?? (clock > from ? clock : from)).toISOString(),
    cycle,
    label,
    ...(of && of !== "air" ? { medium: of } : {}),
    ...(role === "find" ? { find: true } : kind === "measure" ? { repeats: repeats ?? 0, taken: stored } : {}),
    ...(phaseId ? { phaseId } : {}),
    ...(f0Mean !== null ? { f0: { mean: f0Mean, u: f0U } } : {}),
  };
}
