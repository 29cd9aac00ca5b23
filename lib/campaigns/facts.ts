import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import type { StepState } from "@/lib/campaigns/steps-of-campaign";
import { row, rows } from "@/lib/db";
import { findBaseline } from "@/lib/phases/baseline";
import { trackKey, type Facts, type PhaseFacts } from "@/lib/protocol/types";

type Gather = { campaign: CampaignRow; last: StepState | undefined; now: Date };

/** What the interpreter needs to know of the world, in three short queries. */
export async function gatherFacts(transaction: Transaction, { campaign, last, now }: Gather): Promise<Facts> {
  const { abilities, cursor, clock, fitRunId } = campaign;
  if (!abilities || !cursor) throw new Error(`campaign ${campaign.id} has not started`);
  const baseline =
    fitRunId && campaign.mountId
      ? await findBaseline(transaction, {
          campaignId: campaign.id,
          mountId: campaign.mountId,
          setPointC: cursor.setPointC,
          readout: campaign.definition.readout,
          fitRunId,
        })
      : undefined;
  return {
    nowMs: (clock ?? now).getTime(),
    timeZone: campaign.timeZone,
    abilities,
    nominal: { f0Hz: campaign.nominalF0Hz, q: campaign.nominalQ },
    ...(last ? { last: { outcome: last.state as "done" | "failed" | "skipped", phase: await phaseFacts(transaction, last.id) } } : {}),
    ...(baseline ? { baseline } : {}),
    tracks: await findTracks(transaction, campaign.mountId),
  };
}

async function phaseFacts(transaction: Transaction, stepId: string): Promise<PhaseFacts | undefined> {
  const phase = await row<{ f0Hz: number | null; q: number | null; n: number; nUsed: number; unusable: number }>(
    `select s.f0_mean as "f0Hz", s.q_mean as q, s.n, s.n_used as "nUsed", s.unusable
       from phase p join fit_run r on r.campaign_id = p.campaign_id and r.current join phase_summary s on s.phase_id = p.id and s.fit_run_id = r.id
      where p.step_id = $1`,
    [stepId],
    transaction,
  );
  return phase && { n: phase.n, nUsed: phase.nUsed, unusable: phase.unusable, f0Hz: phase.f0Hz ?? undefined, q: phase.q ?? undefined };
}

async function findTracks(transaction: Transaction, mountId: string | null): Promise<Facts["tracks"]> {
  const tracks = await rows<{ medium: string; setPointC: number | null; f0Hz: number; q: number }>(
    `select medium, set_point_c as "setPointC", f0_hz as "f0Hz", q from track where mount_id = $1`,
    [mountId],
    transaction,
  );
  return Object.fromEntries(tracks.map(({ medium, setPointC, f0Hz, q }) => [trackKey(medium, setPointC), { f0Hz, q }]));
}
