import { formatPower, inWords } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";

type Point = { tauS: number; deviation: number };

type Words = { name: string; within: readonly Point[]; across: readonly Point[]; unit?: string };

/** Beyond this ratio of phase to phase over within, what limits lies between the phases; our choice. */
const MUCH_MORE = 1.5;

/**
 * What a stability plot means for the next protocol, in a sentence or two: where a phase is steadiest, whether longer phases
 * would help, and how much more the value moves from phase to phase. Undefined while there is nothing to say.
 *
 * @param within Points over repeats inside phases, by rising averaging time.
 * @param across Points over phase values, by rising averaging time.
 * @param unit Of the deviations; none where they are fractions.
 */
export function stabilityWords({ name, within, across, unit = "" }: Words): string | undefined {
  const steadiest = within.reduce<Point | undefined>((least, point) => (point.deviation > 0 && (!least || point.deviation < least.deviation) ? point : least), undefined);
  if (!steadiest) return undefined;
  const size = `${formatPower(steadiest.deviation)}${unit && `\u00a0${unit}`}`;
  const longest = within[within.length - 1];
  const still = steadiest === longest && within.length > 1;
  const inside = still
    ? `Within a phase ${name} is still getting steadier at ${formatDuration(steadiest.tauS)}, the longest time that can be told: ${size}.`
    : `Within a phase ${name} is steadiest over ${formatDuration(steadiest.tauS)}: ${size}.`;
  const first = across.find(({ deviation }) => deviation > 0);
  if (!first) return `${inside} ${still ? "Longer phases would still help." : "Longer phases would gain nothing."}`;

  const ratio = first.deviation / steadiest.deviation;
  if (ratio < MUCH_MORE) return `${inside} From phase to phase it moves no more than that (hollow)${still ? "; longer phases would still help." : "."}`;
  const times = ratio < 1.75 ? "half as much again" : `${inWords(Math.round(ratio))} times as much`;
  return `${inside} From phase to phase it moves ${times} (hollow): what limits it lies between the phases, and longer phases would gain nothing.`;
}
