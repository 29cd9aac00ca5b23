import type { Transaction } from "sequelize";
import type { RigRow } from "@/lib/agents/contact";
import { rows } from "@/lib/db";

type Correction = { rig: RigRow; takenAt: readonly Date[]; now: Date };

/** One comparison of the agent's clock with the server's. */
export type OffsetSample = { clockMs: number; offsetMs: number };

/** Rig time of readings: the agent's clock less its offset, interpolated between heartbeats. A simulated clock is the time itself. */
export async function rigTimes(transaction: Transaction, { rig, takenAt, now }: Correction): Promise<Date[]> {
  if (rig.clock === "simulated" || takenAt.length === 0) return [...takenAt];
  const clocks = takenAt.map((at) => at.getTime());
  const samples = await rows<{ clock: Date; offsetMs: number }>(
    `(select clock, offset_ms as "offsetMs" from heartbeat where rig_id = $1 and at between $2 and $3 and offset_ms is not null order by at limit 2000)
     union
     (select clock, offset_ms from heartbeat where rig_id = $1 and offset_ms is not null order by at desc limit 1)
     order by 1`,
    [rig.id, new Date(Math.min(...clocks) - 3_600_000), now],
    transaction,
  );
  const offsets = samples.map(({ clock, offsetMs }) => ({ clockMs: clock.getTime(), offsetMs }));
  return clocks.map((clockMs) => new Date(Math.round(clockMs - offsetAt(clockMs, offsets))));
}

/** Offset at a moment of the agent's clock, linear between samples, constant outside them; 0 without any. */
export function offsetAt(clockMs: number, samples: readonly OffsetSample[]): number {
  if (samples.length === 0) return 0;
  let low = 0;
  let high = samples.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (samples[middle].clockMs <= clockMs) low = middle + 1;
    else high = middle;
  }
  if (low === 0) return samples[0].offsetMs;
  if (low === samples.length) return samples[low - 1].offsetMs;
  const before = samples[low - 1];
  const after = samples[low];
  const span = after.clockMs - before.clockMs;
  return span > 0 ? before.offsetMs + ((after.offsetMs - before.offsetMs) * (clockMs - before.clockMs)) / span : before.offsetMs;
}
