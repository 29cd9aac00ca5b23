import type { Transaction } from "sequelize";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { nameOf, type By } from "@/lib/people/actor";
import { recordEvent } from "@/lib/campaigns/record-event";

export type HoldReason = "person" | "task" | "limit" | "failure" | "silence" | "takeOver" | "setAside";

type OpenHold = { campaignId: string; reason: HoldReason; text: string; by: By; now: Date };

/**
 * Opens a hold and holds the campaign. Reasons of which only one may be open (person, silence, take-over, set aside) keep the
 * first. A campaign that has ended is left alone. Returns the id of the open hold, or null when there is nothing to hold.
 */
export async function openHold(transaction: Transaction, { campaignId, reason, text, by, now }: OpenHold): Promise<string | null> {
  const held = await change(
    `update campaign set state = 'held' where id = $1 and state in ('running', 'held')`,
    [campaignId],
    transaction,
  );
  if (held === 0) return null;
  const opened = await row<{ id: string }>(
    `insert into hold (campaign_id, reason, text, opened_by, opened_at, opened_clock)
     select c.id, $2, $3, $4, $5, case when rig.clock = 'real' then $5 else rig.reported_clock end
       from campaign c join rig on rig.id = c.rig_id where c.id = $1
     on conflict do nothing
     returning id`,
    [campaignId, reason, text, by === "longreed" ? null : by.id, now],
    transaction,
  );
  if (!opened) {
    const open = await row<{ id: string }>(
      `select id from hold where campaign_id = $1 and reason = $2 and released_at is null`,
      [campaignId, reason],
      transaction,
    );
    return open?.id ?? null;
  }
  await recordEvent(transaction, { campaignId, now, kind: "hold", who: nameOf(by), text });
  await notify(`campaign:${campaignId}`, transaction);
  await notify(`changed:campaign:${campaignId}`, transaction);
  return opened.id;
}
