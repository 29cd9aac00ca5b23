/** Flags a fit gives by itself, in the order of their bits. */
export const FIT_FLAGS = ["failed", "edge", "bent", "narrow", "sparse", "noisy", "distorted", "rushed"] as const;

/** Every flag a reading can carry; the position is the bit: 1, 2, 4, … */
export const FLAGS = [...FIT_FLAGS, "clock", "late"] as const;

export type FitFlag = (typeof FIT_FLAGS)[number];
export type Flag = (typeof FLAGS)[number];

/** The flags as one whole number, bit i set when FLAGS[i] is present. */
export function flagBits(flags: readonly Flag[]): number {
  let bits = 0;
  for (const flag of flags) bits |= 1 << FLAGS.indexOf(flag);
  return bits;
}

/**
 * The flags of a stored number, in the order of FLAGS.
 *
 * @throws RangeError if the number is not whole, is negative, or has a bit no flag owns.
 */
export function flagNames(bits: number): Flag[] {
  if (!Number.isInteger(bits) || bits < 0 || bits >= 1 << FLAGS.length) {
    throw new RangeError(`flag bits must be a whole number from 0 to ${(1 << FLAGS.length) - 1}, got ${bits}`);
  }
  return FLAGS.filter((_, i) => (bits & (1 << i)) !== 0);
}

/** A reading with any of these bits does not enter its phase value. */
export const LEFT_OUT = flagBits(["failed", "edge", "bent", "late"]);
