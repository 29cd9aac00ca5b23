import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";

/**
 * The cell is safe: parking is over. A stopped campaign leaves the rig, one that is being set aside does too; one that is
 * merely held stays on it, parked.
 */
export async function freeRig(transaction: Transaction, campaign: CampaignRow): Promise<void> {
  await change(
    `update campaign set parking = case when state = 'held' then 'parked' else 'none' end,
       set_aside = state = 'held' and exists (select 1 from hold where campaign_id = $1 and reason = 'setAside' and released_at is null)
      where id = $1`,
    [campaign.id],
    transaction,
  );
  await wakeRig(transaction, { rigId: campaign.rigId });
  await notify(`changed:campaign:${campaign.id}`, transaction);
}

/** Lets the next queued campaign of a rig be looked at. */
export async function wakeRig(transaction: Transaction, { rigId }: { rigId: string }): Promise<void> {
  const queued = await row<{ id: string }>(
    `update campaign set needs_advance = true
      where id = (select id from campaign where rig_id = $1 and state = 'queued' order by priority desc, queued_at, id limit 1) returning id`,
    [rigId],
    transaction,
  );
  if (queued) await notify(`campaign:${queued.id}`, transaction);
}
