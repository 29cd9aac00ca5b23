import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { endCampaign } from "@/lib/campaigns/end";
import { freeRig } from "@/lib/campaigns/free-rig";
import { makeStep } from "@/lib/campaigns/make-step";
import { openHold } from "@/lib/campaigns/open-hold";
import { change } from "@/lib/db";
import { describe } from "@/lib/protocol/describe";
import type { Action, Cursor } from "@/lib/protocol/types";

type Perform = { campaign: CampaignRow; cursor: Cursor; action: Action; now: Date };

/** Carries out what the interpreter decided; cursor and step are stored in one transaction. */
export async function perform(transaction: Transaction, { campaign, cursor, action, now }: Perform): Promise<void> {
  await change(
    `update campaign set cursor = $2, cursor_text = $3 where id = $1`,
    [campaign.id, JSON.stringify(cursor), describe(campaign.definition, cursor)],
    transaction,
  );
  switch (action.do) {
    case "step":
      return makeStep(transaction, { campaign, cursor, plan: action.step, now });
    case "hold":
      return hold(transaction, campaign, action, now);
    case "stop":
      return endCampaign(transaction, { campaign, state: "stopped", text: action.text, by: "longreed", now });
    case "parked":
      return freeRig(transaction, campaign);
    case "finish":
      return endCampaign(transaction, { campaign, state: "finished", text: "Everything in the protocol has been done", by: "longreed", now });
  }
}

async function hold(transaction: Transaction, campaign: CampaignRow, action: Extract<Action, { do: "hold" }>, now: Date) {
  await openHold(transaction, { campaignId: campaign.id, reason: action.reason, text: action.text, by: "longreed", now });
  await openAlarm(transaction, {
    now,
    clock: campaign.clock,
    rigId: campaign.rigId,
    campaignId: campaign.id,
    sensorId: campaign.sensorId,
    source: "system",
    kind: action.reason === "limit" ? "not-clean" : "measurement",
    text: `${campaign.rigName}, ${campaign.name}: ${action.text}`,
    actionText: "The campaign holds.",
    mail: true,
  });
}
