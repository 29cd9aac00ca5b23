import { audit } from "@/lib/audit/record";
import { readBindings, readChosen, type SlotBindings } from "@/lib/campaigns/bindings";
import { inTransaction } from "@/lib/db";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";

type NewCampaign = {
  by: Actor;
  now: Date;
  protocolVersionId: string;
  sensorId: string;
  rigId: string;
  slots: SlotBindings;
  startAt?: Date;
  priority?: number;
  name?: string;
};

/** Makes a draft: one run of a protocol version with one sensor on one rig, each slot bound to a port and a lot. */
export async function createCampaign({ by, now, slots, name, ...given }: NewCampaign): Promise<{ id: string; name: string }> {
  demand(by, "edit campaigns");
  return inTransaction(async (transaction) => {
    const chosen = await readChosen({ ...given, now }, transaction);
    const bound = await readBindings(chosen, slots, transaction);
    const campaign = await Campaign.create(
      { ...given, name: name ?? `${chosen.protocolName}, ${chosen.sensor.serial} on ${chosen.rig.name}`, state: "draft", createdBy: by.id, createdAt: now },
      { transaction },
    );
    await CampaignSlot.bulkCreate(
      bound.map(({ slot, port, lot }) => ({ campaignId: campaign.id, slot, port, lotId: lot.id })),
      { transaction },
    );
    await audit(transaction, { by, now, action: "create", entity: "campaign", entityId: campaign.id, detail: { ...given, slots, name: campaign.name } });
    await notify(`changed:campaign:${campaign.id}`, transaction);
    return { id: campaign.id, name: campaign.name };
  });
}
