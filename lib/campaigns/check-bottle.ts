import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { openHold } from "@/lib/campaigns/open-hold";
import { row } from "@/lib/db";
import { openTask } from "@/lib/tasks/open-task";

type Bottle = { port: number; wanted: string; loaded: string };

/**
 * Before a pumping step goes out: a port may have got another liquid since the campaign was queued, for somebody else's work.
 * Then the campaign waits for the right bottle. A port without any record of a load is left to the rig, which says when it is empty.
 */
export async function checkBottle(transaction: Transaction, { campaign, slot, stepId, now }: { campaign: CampaignRow; slot: string; stepId: string; now: Date }): Promise<void> {
  const wrong = await row<Bottle>(
    `select cs.port, wanted.name as wanted, loaded.name as loaded
       from campaign_slot cs
       join lot on lot.id = cs.lot_id join liquid wanted on wanted.id = lot.liquid_id
       join port on port.rig_id = $2 and port.number = cs.port
       join load on load.id = port.load_id join lot present on present.id = load.lot_id join liquid loaded on loaded.id = present.liquid_id
      where cs.campaign_id = $1 and cs.slot = $3 and wanted.id <> loaded.id`,
    [campaign.id, campaign.rigId, slot],
    transaction,
  );
  if (!wrong) return;
  const instruction = `Load ${wrong.wanted} on port ${wrong.port} of ${campaign.rigName}: ${wrong.loaded} stands there`;
  const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "task", text: instruction, by: "longreed", now });
  await openTask(transaction, { rigId: campaign.rigId, campaignId: campaign.id, stepId, holdId, kind: "load", urgency: "high", port: wrong.port, instruction, now });
}
