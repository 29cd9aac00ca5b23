import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { wakeRig } from "@/lib/campaigns/free-rig";
import { recordEvent } from "@/lib/campaigns/record-event";
import { openStep, skipStep } from "@/lib/campaigns/steps-of-campaign";
import { change } from "@/lib/db";
import { notify } from "@/lib/notify";
import { nameOf, type By } from "@/lib/people/actor";

type End = {
  campaign: CampaignRow;
  state: "finished" | "stopped" | "failed";
  text: string;
  by: By;
  now: Date;
};

const WORDS = { finished: "Finished", stopped: "Stopped early", failed: "Failed" } as const;

/**
 * Ends a campaign for good: its holds are over and its tasks are withdrawn. A stopped one that has been measuring keeps its rig
 * until the step in hand has ended and the park steps have made the cell safe; a person who has taken the rig over keeps it till the give-back.
 */
export async function endCampaign(transaction: Transaction, { campaign, state, text, by, now }: End): Promise<void> {
  const { id } = campaign;
  const open = await openStep(transaction, id);
  const parks = state !== "finished" && campaign.cursor !== null && !campaign.setAside;
  if (open && open.state === "ready" && open.detour !== "park") await skipStep(transaction, { stepId: open.id, now });
  await change(`update hold set released_at = greatest($2, opened_at), released_clock = $3 where campaign_id = $1 and released_at is null and ($4::boolean or reason <> 'takeOver')`, [id, now, campaign.clock, !parks], transaction);
  await change(`update operator_task set state = 'withdrawn' where campaign_id = $1 and state = 'open'`, [id], transaction);
  await change(
    `update campaign set state = $2, ended_at = $3, ended_clock = $4, end_text = $5, set_aside = false, needs_advance = $6::boolean,
       parking = case when not $6::boolean then 'none' when parking = 'running' then 'running'
                      when parking = 'parked' and not exists (select 1 from step s where s.campaign_id = $1 and s.sequence = (cursor->>'sequence')::int
                                                               and s.detour = 'park' and s.state = 'failed') then 'none'
                      else 'wanted' end
      where id = $1`,
    [id, state, now, campaign.clock, text, parks],
    transaction,
  );
  await recordEvent(transaction, { campaignId: id, now, kind: state, who: nameOf(by), text: `${WORDS[state]}: ${text}` });
  await audit(transaction, { by, now, action: state === "finished" ? "finish" : state === "stopped" ? "stop" : "fail", entity: "campaign", entityId: id, detail: { text } });
  if (parks) await notify(`campaign:${id}`, transaction);
  await wakeRig(transaction, { rigId: campaign.rigId });
  await notify(`changed:campaign:${id}`, transaction);
}
