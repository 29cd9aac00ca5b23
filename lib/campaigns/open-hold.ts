import type { Transaction } from "sequelize";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { nameOf, type By } from "@/lib/people/actor";
import type { Hold } from "@/models/hold";

type Opening = {
  campaignId: string;
  reason: Hold["reason"];
  text: string;
  by: By;
  now: Date;
  /** Protocol time; absent before a simulated rig's first report. */
  clock?: Date;
};

/**
 * Opens a hold on a running or held campaign, with its line in the log; from then on no step goes out.
 * Of `person`, `silence`, `takeOver` and `setAside` one at a time is open: another asks for nothing new.
 * @returns The id of the hold, the one already open included.
 */
export async function openHold(transaction: Transaction, { campaignId, reason, text, by, now, clock }: Opening): Promise<string> {
  const opened = await row<{ id: string }>(
    `insert into hold (campaign_id, reason, text, opened_by, opened_at, opened_clock) values ($1, $2, $3, $4, $5, $6)
     on conflict (campaign_id, reason) where released_at is null and reason in ('person', 'silence', 'takeOver', 'setAside') do nothing
     returning id`,
    [campaignId, reason, text, by === "longreed" ? null : by.id, now, clock ?? null],
    transaction,
  );
  if (!opened) {
    const standing = await row<{ id: string }>(
      "select id from hold where campaign_id = $1 and reason = $2 and released_at is null",
      [campaignId, reason],
      transaction,
    );
    if (!standing) throw new Error(`hold ${reason} of campaign ${campaignId} was neither open nor opened`);
    return standing.id;
  }
  await change("update campaign set state = 'held' where id = $1 and state = 'running'", [campaignId], transaction);
  await change(
    "insert into campaign_event (campaign_id, at, clock, kind, who, text) values ($1, $2, $3, 'hold', $4, $5)",
    [campaignId, now, clock ?? null, nameOf(by), text],
    transaction,
  );
  await notify(`campaign:${campaignId}`, transaction);
  return opened.id;
}
