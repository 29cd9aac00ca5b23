import type { Transaction } from "sequelize";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, rows } from "@/lib/db";
import { notify } from "@/lib/notify";
import { nameOf, type By } from "@/lib/people/actor";
import type { HoldReason } from "@/lib/campaigns/open-hold";

type ReleaseHolds = { campaignId: string; reasons?: readonly HoldReason[]; holdId?: string; by: By; now: Date };

/** Releases open holds by reason or id; when none is left the campaign runs on. Returns the reasons released. */
export async function releaseHolds(transaction: Transaction, { campaignId, reasons, holdId, by, now }: ReleaseHolds): Promise<HoldReason[]> {
  const released = await rows<{ reason: HoldReason }>(
    `update hold set released_at = greatest(opened_at, $2), released_by = $3,
       released_clock = (select case when rig.clock = 'real' then $2 else rig.reported_clock end
                           from campaign c join rig on rig.id = c.rig_id where c.id = $1)
      where campaign_id = $1 and released_at is null and ($4::text[] is null or reason = any($4)) and ($5::bigint is null or id = $5)
      returning reason`,
    [campaignId, now, by === "longreed" ? null : by.id, reasons ?? null, holdId ?? null],
    transaction,
  );
  if (released.length === 0) return [];
  await change(
    `update campaign set needs_advance = true,
       state = case when state = 'held' and not exists (select 1 from hold where campaign_id = $1 and released_at is null) then 'running' else state end
      where id = $1`,
    [campaignId],
    transaction,
  );
  await recordEvent(transaction, { campaignId, now, kind: "release", who: nameOf(by), text: "The hold was released" });
  await notify(`campaign:${campaignId}`, transaction);
  await notify(`changed:campaign:${campaignId}`, transaction);
  return released.map(({ reason }) => reason);
}
