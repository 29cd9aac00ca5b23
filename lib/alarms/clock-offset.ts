import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import { row } from "@/lib/db";

const LIMIT_MS = 5000;
const KIND = "clock";

/** A rig clock more than 5 s off is told to people; readings are corrected either way. */
export async function judgeClockOffset(transaction: Transaction, { rigId, offsetMs, now }: { rigId: string; offsetMs: number; now: Date }): Promise<void> {
  if (Math.abs(offsetMs) <= LIMIT_MS) {
    await returnAlarm(transaction, { rigId, kind: KIND, now, text: "The clock is right again" });
    return;
  }
  const rig = await row<{ name: string }>(`select name from rig where id = $1`, [rigId], transaction);
  const seconds = (offsetMs / 1000).toFixed(1).replace("-", "−");
  await openAlarm(transaction, {
    now,
    rigId,
    source: "system",
    kind: KIND,
    value: offsetMs / 1000,
    limitValue: LIMIT_MS / 1000,
    unit: "s",
    text: `${rig?.name}: the clock of the rig agent is ${seconds} s off the server's, limit ± 5 s`,
    actionText: "The times of readings are corrected by the measured offset; measuring goes on.",
    mail: true,
  });
}
