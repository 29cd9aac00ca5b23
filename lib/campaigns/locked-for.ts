import type { Transaction } from "sequelize";
import { lockCampaign, type CampaignRow } from "@/lib/campaigns/campaign-row";
import { notFound } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import type { Permission } from "@/lib/permissions";

type For = { by: Actor; permission: Permission; campaignId: string; now: Date };

/** The campaign locked for a person who may. @throws AppError 403, 404. */
export async function lockedFor(transaction: Transaction, { by, permission, campaignId, now }: For): Promise<CampaignRow> {
  demand(by, permission);
  const campaign = await lockCampaign(transaction, { campaignId, now });
  if (!campaign) throw notFound("campaign");
  return campaign;
}

export const hasEnded = ({ state }: Pick<CampaignRow, "state">): boolean => state === "finished" || state === "stopped" || state === "failed";
