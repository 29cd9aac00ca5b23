import type { Transaction } from "sequelize";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { nameOf, type By } from "@/lib/people/actor";

type Release = { holdId: string; text: string; by: By; now: Date; clock?: Date };

/**
 * Ends one hold, with its line in the log. When it was the last open one, the campaign runs on: dispatch is woken
 * and decides what comes next. A hold already released stays as it was.
 */
export async function releaseHold(transaction: Transaction, { holdId, text, by, now, clock }: Release): Promise<void> {
  const released = await row<{ campaignId: string }>(
    `update hold set released_by = $2, released_at = greatest($3, opened_at), released_clock = $4
      where id = $1 and released_at is null returning campaign_id as "campaignId"`,
    [holdId, by === "longreed" ? null : by.id, now, clock ?? null],
    transaction,
  );
  if (!released) return;
  const { campaignId } = released;
  await change(
    `update campaign set state = 'running', needs_advance = true
      where id = $1 and state = 'held' and not exists (select 1 from hold where campaign_id = $1 and released_at is null)`,
    [campaignId],
    transaction,
  );
  await change(
    "insert into campaign_event (campaign_id, at, clock, kind, who, text) values ($1, $2, $3, 'release', $4, $5)",
    [campaignId, now, clock ?? null, nameOf(by), text],
    transaction,
  );
  await notify(`campaign:${campaignId}`, transaction);
}
