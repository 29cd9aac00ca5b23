import { forgetOldResults } from "@/lib/analysis/results";
import { change } from "@/lib/db";
import { forgetOldKeys } from "@/lib/http/idempotency";
import { dropAbandoned } from "@/lib/imports/receive";

const DAY_MS = 86_400_000;
const HEARTBEATS_KEPT_DAYS = 30;

/** Drops what is of no use any more: old heartbeats, old answers to repeated calls, results nobody asks for. Nothing of a campaign is ever dropped. */
export async function tidyUp({ now }: { now: Date }): Promise<void> {
  const heartbeatsFrom = new Date(now.getTime() - HEARTBEATS_KEPT_DAYS * DAY_MS);
  await change(`delete from heartbeat where id in (select id from heartbeat where at < $1 limit 10000)`, [heartbeatsFrom]);
  await forgetOldKeys({ now });
  await dropAbandoned({ now });
  await forgetOldResults({ now });
}
