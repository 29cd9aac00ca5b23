import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { openHold } from "@/lib/campaigns/open-hold";
import { recordEvent } from "@/lib/campaigns/record-event";
import { releaseHolds } from "@/lib/campaigns/release-hold";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { occupyingCampaign } from "@/lib/rigs/occupying-campaign";
import { Rig } from "@/models/rig";

type TakeOver = { by: Actor; now: Date; rigId: string; why?: string };
type GiveBack = { by: Actor; now: Date; rigId: string; note?: string };

/** A person works at the rig by hand: its campaign is held, no step goes out until the rig is given back. Taking over again changes nothing. */
export async function takeOverRig({ by, now, rigId, why }: TakeOver): Promise<{ holdId: string }> {
  demand(by, "take over rigs");
  return inTransaction(async (transaction) => {
    const rig = await lockedRig(rigId, transaction);
    const campaign = await occupyingCampaign(rigId, transaction);
    if (!campaign) throw conflict(`No campaign is on ${rig.name}; there is nothing to take over`, "rig-free");
    if (campaign.state !== "running" && campaign.state !== "held")
      throw conflict(`${campaign.name} has ended and is being parked; wait until ${rig.name} is free`);

    const standing = await openTakeOver(campaign.id, transaction);
    if (standing) return { holdId: standing.id };
    const text = why ? `${by.name} works at ${rig.name} by hand: ${why}` : `${by.name} works at ${rig.name} by hand`;
    const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "takeOver", text, by, now });
    if (!holdId) throw conflict(`${campaign.name} has just ended; there is nothing to take over`, "rig-free");
    await audit(transaction, { by, now, action: "take over", entity: "rig", entityId: rigId, detail: { campaignId: campaign.id, why } });
    await notify("changed:rigs", transaction);
    return { holdId };
  });
}

/** Ends a take-over: the campaign runs on unless something else holds it. */
export async function giveBackRig({ by, now, rigId, note }: GiveBack): Promise<{ holdId: string }> {
  demand(by, "take over rigs");
  return inTransaction(async (transaction) => {
    const rig = await lockedRig(rigId, transaction);
    const campaign = await occupyingCampaign(rigId, transaction);
    const hold = campaign && (await openTakeOver(campaign.id, transaction));
    if (!campaign || !hold) throw conflict(`Nobody has taken over ${rig.name}`);

    const text = note ? `gave ${rig.name} back: ${note}` : `gave ${rig.name} back`;
    await releaseHolds(transaction, { campaignId: campaign.id, holdId: hold.id, by, now });
    await recordEvent(transaction, { campaignId: campaign.id, now, kind: "giveBack", who: by.name, text });
    await audit(transaction, { by, now, action: "give back", entity: "rig", entityId: rigId, detail: { campaignId: campaign.id, note } });
    await notify("changed:rigs", transaction);
    return { holdId: hold.id };
  });
}

async function lockedRig(rigId: string, transaction: Transaction): Promise<Rig> {
  const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.NO_KEY_UPDATE });
  if (!rig) throw notFound("rig");
  return rig;
}

function openTakeOver(campaignId: string, transaction: Transaction): Promise<{ id: string } | undefined> {
  return row<{ id: string }>(
    "select id from hold where campaign_id = $1 and reason = 'takeOver' and released_at is null",
    [campaignId],
    transaction,
  );
}
