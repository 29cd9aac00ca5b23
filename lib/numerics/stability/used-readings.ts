import { FLAGS, LEFT_OUT, type Flag } from "@/lib/numerics/resonance/flags";

/** Why a reading does not count: a flag, a person's exclusion, the protocol's discard, or no finite value. */
export type LeftOutReason = Flag | "excluded" | "discarded" | "no value";

export type UsedReadings = {
  /** 1 where a reading does not count; for `stretches`. */
  leftOut: Uint8Array;
  used: number;
  /** Readings left out by the first of their reasons, in the order below; together with `used` they are all readings. */
  reasons: Partial<Record<LeftOutReason, number>>;
  /** Readings used although they carry a flag, by flag; one with two flags is counted under both. */
  flaggedButUsed: Partial<Record<Flag, number>>;
};

/**
 * Which readings of a series count, and how many do not for which reason.
 *
 * A reading with several reasons is counted once: discarded, then excluded, then its first flag that leaves out, then no value.
 *
 * @param values One per reading; not finite where there is none.
 * @param flags Bits of FLAGS of each reading.
 * @param discarded Not 0 for leading repeats that the protocol discards; none by default.
 * @param excluded Not 0 where a person left it out; none by default.
 * @param leavesOut Flags that leave a reading out, as bits; by default those that keep it out of a phase value.
 * @throws RangeError if lengths differ.
 */
export function usedReadings({
  values,
  flags,
  discarded,
  excluded,
  leavesOut = LEFT_OUT,
}: {
  values: Float64Array;
  flags: Uint16Array;
  discarded?: Uint8Array;
  excluded?: Uint8Array;
  leavesOut?: number;
}): UsedReadings {
  const n = values.length;
  if ([flags, discarded, excluded].some((marks) => marks && marks.length !== n)) throw new RangeError("values and marks must be equally many");
  const leftOut = new Uint8Array(n);
  const reasons: Partial<Record<LeftOutReason, number>> = {};
  const flaggedButUsed: Partial<Record<Flag, number>> = {};
  let used = 0;
  for (let i = 0; i < n; i++) {
    const reason = reasonOf(values[i], flags[i] & leavesOut, discarded?.[i], excluded?.[i]);
    if (reason) {
      leftOut[i] = 1;
      reasons[reason] = (reasons[reason] ?? 0) + 1;
      continue;
    }
    used++;
    if (flags[i] === 0) continue;
    for (let bit = 0; bit < FLAGS.length; bit++) {
      if (flags[i] & (1 << bit)) flaggedButUsed[FLAGS[bit]] = (flaggedButUsed[FLAGS[bit]] ?? 0) + 1;
    }
  }
  return { leftOut, used, reasons, flaggedButUsed };
}

function reasonOf(value: number, leavingOut: number, discarded = 0, excluded = 0): LeftOutReason | undefined {
  if (discarded !== 0) return "discarded";
  if (excluded !== 0) return "excluded";
  if (leavingOut !== 0) return FLAGS[31 - Math.clz32(leavingOut & -leavingOut)];
  return Number.isFinite(value) ? undefined : "no value";
}
