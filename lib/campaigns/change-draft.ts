import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { readBindings, readChosen, type SlotBindings } from "@/lib/campaigns/bindings";
import { setGiven } from "@/lib/changes";
import { inTransaction } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";

type DraftChange = {
  by: Actor;
  now: Date;
  campaignId: string;
  protocolVersionId?: string;
  sensorId?: string;
  rigId?: string;
  slots?: SlotBindings;
  startAt?: Date | null;
  priority?: number;
  name?: string;
};

/**
 * Changes a draft. Of a queued campaign only name, priority and start may still change: its cautions were acknowledged for what it
 * was. Another protocol version or rig needs the slots again when the present ones do not fit.
 */
export async function changeCampaign({ by, now, campaignId, slots, ...wanted }: DraftChange): Promise<{ id: string; name: string }> {
  demand(by, "edit campaigns");
  return inTransaction(async (transaction) => {
    const campaign = await lockedCampaign(campaignId, transaction);
    const { protocolVersionId, sensorId, rigId } = campaign;
    const bindsAnew = slots !== undefined || wanted.protocolVersionId !== undefined || wanted.sensorId !== undefined || wanted.rigId !== undefined;
    if (bindsAnew && campaign.state !== "draft") throw conflict("Only a draft can change what it runs, where, and with which liquids; make a new campaign");
    if (campaign.state !== "draft" && campaign.state !== "queued") throw conflict(`The campaign is ${campaign.state}; only a draft or a queued campaign can change`);
    if (!protocolVersionId || !sensorId || !rigId) throw conflict("An imported campaign has nothing to change here");

    if (bindsAnew) {
      const chosen = await readChosen({ protocolVersionId, sensorId, rigId, ...given(wanted), now }, transaction);
      const bound = await readBindings(chosen, slots ?? (await slotsNow(campaignId, transaction)), transaction);
      await CampaignSlot.destroy({ where: { campaignId }, transaction });
      await CampaignSlot.bulkCreate(
        bound.map(({ slot, port, lot }) => ({ campaignId, slot, port, lotId: lot.id })),
        { transaction },
      );
    }
    const changes = setGiven(campaign, wanted);
    if (campaign.state === "queued") campaign.needsAdvance = true;
    await campaign.save({ transaction });
    if (changes || bindsAnew) {
      await audit(transaction, { by, now, action: "update", entity: "campaign", entityId: campaignId, detail: { ...changes, ...(slots && { slots }) } });
      await notify(`campaign:${campaignId}`, transaction);
      await notify(`changed:campaign:${campaignId}`, transaction);
    }
    return { id: campaignId, name: campaign.name };
  });
}

/** Deletes a draft that never started; its audit events stay. */
export async function deleteDraft({ by, now, campaignId }: { by: Actor; now: Date; campaignId: string }): Promise<void> {
  demand(by, "edit campaigns");
  await inTransaction(async (transaction) => {
    const campaign = await lockedCampaign(campaignId, transaction);
    if (campaign.state !== "draft") throw conflict(`The campaign is ${campaign.state}; only a draft is ever deleted`);
    await campaign.destroy({ transaction });
    await audit(transaction, { by, now, action: "delete draft", entity: "campaign", entityId: campaignId, detail: { name: campaign.name } });
    await notify(`changed:campaign:${campaignId}`, transaction);
  });
}

async function lockedCampaign(campaignId: string, transaction: Transaction): Promise<Campaign> {
  const campaign = await Campaign.findByPk(campaignId, { transaction, lock: transaction.LOCK.UPDATE });
  if (!campaign) throw notFound("campaign");
  return campaign;
}

async function slotsNow(campaignId: string, transaction: Transaction): Promise<SlotBindings> {
  const slots = await CampaignSlot.findAll({ where: { campaignId }, transaction });
  return Object.fromEntries(slots.map(({ slot, port, lotId }) => [slot, { port, lotId }]));
}

const given = ({ protocolVersionId, sensorId, rigId }: Pick<DraftChange, "protocolVersionId" | "sensorId" | "rigId">) => ({
  ...(protocolVersionId && { protocolVersionId }),
  ...(sensorId && { sensorId }),
  ...(rigId && { rigId }),
});
