import type { Transaction } from "sequelize";
import { change } from "@/lib/db";
import { notify } from "@/lib/notify";

/** Something is to be decided for a campaign: whoever looks next takes it up, and a worker is told at once. */
export async function wakeCampaign(transaction: Transaction, campaignId: string): Promise<void> {
  await change(`update campaign set needs_advance = true where id = $1`, [campaignId], transaction);
  await notify(`campaign:${campaignId}`, transaction);
}
