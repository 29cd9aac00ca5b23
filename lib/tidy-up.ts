import { change } from "@/lib/db";

const DAY_MS = 86_400_000;
const HEARTBEATS_KEPT_DAYS = 30;
const IDEMPOTENCY_KEPT_DAYS = 30;

/** Drops what is of no use any more: old heartbeats and old answers to repeated calls. Nothing of a campaign is ever dropped. */
export async function tidyUp({ now }: { now: Date }): Promise<void> {
  const before = (days: number) => new Date(now.getTime() - days * DAY_MS);
  await change(`delete from heartbeat where id in (select id from heartbeat where at < $1 limit 10000)`, [before(HEARTBEATS_KEPT_DAYS)]);
  await change(`delete from idempotency_key where created_at < $1`, [before(IDEMPOTENCY_KEPT_DAYS)]);
}
