import { audit } from "@/lib/audit/record";
import { lockedFor } from "@/lib/campaigns/locked-for";
import { openHold } from "@/lib/campaigns/open-hold";
import { inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import type { Actor } from "@/lib/people/actor";

type HoldCampaign = { by: Actor; campaignId: string; why?: string; now: Date };

/** A person pauses a campaign; it takes effect after the present repeat. Holding a campaign that a person holds changes nothing. */
export function holdCampaign({ by, campaignId, why, now }: HoldCampaign) {
  return inTransaction(async (transaction) => {
    const { state } = await lockedFor(transaction, { by, permission: "hold campaigns", campaignId, now });
    if (state !== "running" && state !== "held") throw conflict(`A campaign that is ${state} cannot be held; only one that runs or is held can`);
    const text = why ?? `Paused by ${by.name}`;
    await openHold(transaction, { campaignId, reason: "person", text, by, now });
    await audit(transaction, { by, now, action: "hold", entity: "campaign", entityId: campaignId, detail: { why: why ?? null } });
    return { id: campaignId, state: "held" as const };
  });
}
