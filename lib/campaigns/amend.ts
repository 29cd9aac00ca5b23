import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { lockedFor } from "@/lib/campaigns/locked-for";
import { recordEvent } from "@/lib/campaigns/record-event";
import { slotsOf } from "@/lib/campaigns/slots-of";
import { openStep } from "@/lib/campaigns/steps-of-campaign";
import { change, inTransaction, row, rows } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import type { Actor } from "@/lib/people/actor";
import { amend } from "@/lib/protocol/amend";
import type { Definition } from "@/lib/protocol/schema";

type AmendCampaign = { by: Actor; campaignId: string; protocolVersionId: string; why: string; now: Date };

/** Moves a held campaign to another version of its protocol. What was measured keeps the version that it came from. */
export function amendCampaign({ by, campaignId, protocolVersionId, why, now }: AmendCampaign) {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "edit campaigns", campaignId, now });
    if (campaign.state !== "held" || !campaign.cursor) throw conflict("Only a held campaign can move to another version; pause it first");
    const version = await row<{ definition: Definition; version: number }>(
      `select v.definition, v.version from protocol_version v
        where v.id = $1 and v.protocol_id = (select protocol_id from protocol_version where id = $2)`,
      [protocolVersionId, campaign.protocolVersionId],
      transaction,
    );
    if (!version) throw notFound("version of this campaign's protocol");
    const open = await openStep(transaction, campaignId);
    if (open?.state === "out") throw conflict("The rig agent has not ended the present step yet; try again in a moment");
    const amended = amend(campaign.definition, version.definition, campaign.cursor);
    if ("impossible" in amended) throw impossible(amended.impossible);
    await demandSlots(transaction, campaignId, version.definition);

    await change(
      `insert into amendment (campaign_id, from_sequence, from_version_id, to_version_id, cursor_before, cursor_after, why, person_id, at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9)`,
      [
        campaignId,
        amended.cursor.sequence + 1,
        campaign.protocolVersionId,
        protocolVersionId,
        JSON.stringify(campaign.cursor),
        JSON.stringify(amended.cursor),
        why,
        by.id,
        now,
      ],
      transaction,
    );
    await change(
      `update campaign set protocol_version_id = $2, cursor = $3 where id = $1`,
      [campaignId, protocolVersionId, JSON.stringify(amended.cursor)],
      transaction,
    );
    await recordEvent(transaction, { campaignId, now, kind: "amend", who: by.name, text: `Moved to version ${version.version}: ${why}` });
    await audit(transaction, { by, now, action: "amend", entity: "campaign", entityId: campaignId, detail: { protocolVersionId, why } });
    return { id: campaignId, state: "held" as const };
  });
}

/** Slots are bound when a campaign is made, so a version that draws on others cannot go on here. */
async function demandSlots(transaction: Transaction, campaignId: string, definition: Definition): Promise<void> {
  const bound = await rows<{ slot: string }>(`select slot from campaign_slot where campaign_id = $1`, [campaignId], transaction);
  const unbound = slotsOf(definition).filter((slot) => !bound.some((known) => known.slot === slot));
  if (unbound.length > 0) throw impossible(`That version draws on ${unbound.join(", ")}, which this campaign has no port and lot for; make a new campaign of it`);
}
