import type { Transaction } from "sequelize";
import { silenceIsOver } from "@/lib/alarms/silence";
import { releaseHolds } from "@/lib/campaigns/release-hold";
import { rows } from "@/lib/db";

/** Silence shorter than this cannot have been noticed, so nothing has to be looked up. */
const UNNOTICED_MS = 1000;

/** At every contact: a hold for silence ends, and what was told about it returns. */
export async function endSilence(transaction: Transaction, { rigId, lastContactAt, now }: { rigId: string; lastContactAt: Date | null; now: Date }): Promise<void> {
  if (!lastContactAt || now.getTime() - lastContactAt.getTime() < UNNOTICED_MS) return;
  await silenceIsOver(transaction, { rigId, now });
  const held = await rows<{ campaignId: string }>(
    `select h.campaign_id as "campaignId" from hold h join campaign c on c.id = h.campaign_id
      where c.rig_id = $1 and c.state = 'held' and h.reason = 'silence' and h.released_at is null`,
    [rigId],
    transaction,
  );
  for (const { campaignId } of held) await releaseHolds(transaction, { campaignId, reasons: ["silence"], by: "longreed", now });
}
