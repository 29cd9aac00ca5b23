import { derive, normal, uniform, type Key } from "./random";

const flickerOctaves = 20;
const flickerFinestS = 16;

/** √(AVAR) of the sum below for unit blocks, found numerically; makes the flicker floor the number that is asked for. */
const flickerFloor = 1.44;

/**
 * Flicker (1/f) noise with an Allan deviation near 1 at every averaging time from a minute to months.
 *
 * A sum over octaves of values held for 16 s · 2ᵏ, each with its own random phase (after R. F. Voss, in M. Gardner, Scientific
 * American, April 1978), so that the value at a time needs no earlier one.
 *
 * @param key Names the process.
 * @param seconds Time, 0 or more. Within 16 s the value stands.
 */
export function flicker(key: Key, seconds: number): number {
  let sum = 0;
  for (let k = 0; k < flickerOctaves; k++) {
    const octave = derive(key, k);
    const block = Math.floor(seconds / (flickerFinestS * 2 ** k) + uniform(octave));
    sum += normal(derive(octave, block));
  }
  return sum / flickerFloor;
}

const walkLevels = 26;
const walkSpanS = 4096 * 86_400;

/**
 * Random walk (Brownian motion): starts at 0, standard deviation 1 after a day, √d after d days.
 *
 * Lévy's midpoint construction: a straight line over 4096 days, then at each halving a hashed displacement of the midpoint. A value
 * costs 26 hashes and needs no earlier one; below 5 s it runs straight.
 *
 * @param key Names the process.
 * @param seconds Time from the start, 0 to 4096 days.
 */
export function randomWalk(key: Key, seconds: number): number {
  let position = seconds / walkSpanS;
  if (!(position >= 0 && position <= 1)) throw new RangeError(`A random walk runs for 4096 days, not to ${seconds} s`);
  let spanDays = walkSpanS / 86_400;
  let value = position * Math.sqrt(spanDays) * normal(derive(key, -1));
  let cell = 0;
  for (let level = 0; level < walkLevels; level++) {
    const tent = position < 0.5 ? 2 * position : 2 - 2 * position;
    value += tent * 0.5 * Math.sqrt(spanDays) * normal(derive(derive(key, level), cell));
    const right = position >= 0.5 ? 1 : 0;
    cell = cell * 2 + right;
    position = position * 2 - right;
    spanDays /= 2;
  }
  return value;
}
