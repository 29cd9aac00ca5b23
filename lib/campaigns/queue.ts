import { audit } from "@/lib/audit/record";
import { checkDraft } from "@/lib/campaigns/check";
import { SAFETY_NOTE, type Caution } from "@/lib/campaigns/cautions";
import { lockedFor } from "@/lib/campaigns/locked-for";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, inTransaction } from "@/lib/db";
import { conflict, impossible } from "@/lib/errors";
import { listOf, plural } from "@/lib/format";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";
import { CampaignSlot } from "@/models/campaign-slot";
import { CautionAcknowledgement } from "@/models/caution-acknowledgement";
import type { PlannedCampaign } from "@/models/json";

type QueueCampaign = { by: Actor; now: Date; campaignId: string; acknowledgements?: readonly string[] };

/**
 * Puts a draft in line. Cautions that this person has not acknowledged in this very call answer 422 with all of them; what was
 * acknowledged is kept word for word. Queueing a queued campaign changes nothing.
 */
export async function queueCampaign({ by, now, campaignId, acknowledgements = [] }: QueueCampaign): Promise<{ id: string; state: "queued" }> {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "edit campaigns", campaignId, now });
    if (campaign.state === "queued") return { id: campaignId, state: "queued" };
    if (campaign.state !== "draft") throw conflict(`The campaign is ${campaign.state}; only a draft can be queued`);

    const { protocolVersionId, sensorId, rigId, startAt } = campaign;
    const bindings = await CampaignSlot.findAll({ where: { campaignId }, transaction });
    const slots = Object.fromEntries(bindings.map(({ slot, port, lotId }) => [slot, { port, lotId }]));
    const { plan, problems, cautions } = await checkDraft({ protocolVersionId, sensorId, rigId, slots, startAt, now }, transaction);

    const errors = problems.filter(({ severity }) => severity === "error").map(({ path, message }) => ({ path, message }));
    if (errors.length > 0) throw impossible(errors.map(({ message }) => message).join(" "), { errors }, "does-not-fit");
    refuseUnacknowledged(cautions, acknowledgements);

    for (const { code, message } of cautions) {
      await CautionAcknowledgement.create({ campaignId, code, message, personId: by.id, at: now }, { transaction });
      await audit(transaction, { by, now, action: "acknowledge caution", entity: "campaign", entityId: campaignId, detail: { code, message } });
    }
    const { seconds, lowS, highS, steps, repeats, cycles } = plan;
    const planned: PlannedCampaign = { seconds, lowS, highS, steps, repeats, cycles };
    await change(
      "update campaign set state = 'queued', queued_at = $2, planned = $3, needs_advance = true where id = $1",
      [campaignId, now, JSON.stringify(planned)],
      transaction,
    );
    await recordEvent(transaction, { campaignId, now, kind: "queue", who: by.name, text: `Queued on ${campaign.rigName}` });
    await audit(transaction, { by, now, action: "queue", entity: "campaign", entityId: campaignId, detail: { planned } });
    await notify(`campaign:${campaignId}`, transaction);
    await notify(`changed:campaign:${campaignId}`, transaction);
    return { id: campaignId, state: "queued" };
  });
}

function refuseUnacknowledged(cautions: readonly Caution[], acknowledgements: readonly string[]): void {
  const open = cautions.filter(({ code }) => !acknowledgements.includes(code));
  if (open.length === 0) return;
  throw impossible(
    `${open.length} ${plural(open.length, "caution")} to acknowledge first: ${listOf(open.map(({ title }) => title))}. ${SAFETY_NOTE}`,
    { cautions: cautions.map(({ code, message }) => ({ code, message })), note: SAFETY_NOTE },
    "cautions",
  );
}
