/** A queued campaign by what its place in line follows from. */
export type InLine = { id: string; priority: number; queuedAt: Date };

const HIGHEST = 100;
const LOWEST = -100;

/**
 * Priorities that put queued campaigns into a wanted order, where a rig takes the highest priority first and, of equal ones, who has
 * waited longest. Only the moved one changes where that is enough; else those before it are raised as little as needed; else, at
 * the end of the scale, all are numbered anew around nought.
 *
 * @param wanted The whole line in the wanted order, first first.
 * @param moved Which of them was moved.
 * @returns The new priority of each that changes, by id; undefined when the line is too long for the 201 priorities there are.
 */
export function queuePriorities(wanted: readonly InLine[], moved: string): Map<string, number> | undefined {
  const place = wanted.findIndex(({ id }) => id === moved);
  if (place < 0) throw new RangeError(`campaign ${moved} is not in the line`);
  const priorities = wanted.map(({ priority }) => priority);
  const { priority } = wanted[place];
  const low = place + 1 < wanted.length ? priorities[place + 1] + stepBetween(wanted, place) : LOWEST;
  const high = place > 0 ? priorities[place - 1] - stepBetween(wanted, place - 1) : HIGHEST;
  priorities[place] = Math.max(low, Math.min(high, priority));
  for (let before = place - 1; before >= 0; before--) priorities[before] = Math.max(priorities[before], priorities[before + 1] + stepBetween(wanted, before));
  if (priorities[0] > HIGHEST && !numberAnew(priorities, wanted)) return undefined;
  return new Map(wanted.flatMap(({ id, priority: old }, i) => (old === priorities[i] ? [] : [[id, priorities[i]] as const])));
}

/** One that has waited longer than the one before it needs a lower priority to stand behind it. */
function stepBetween(wanted: readonly InLine[], before: number): 0 | 1 {
  const [first, second] = [wanted[before], wanted[before + 1]];
  const waited = first.queuedAt.getTime() - second.queuedAt.getTime();
  return waited < 0 || (waited === 0 && BigInt(first.id) < BigInt(second.id)) ? 0 : 1;
}

function numberAnew(priorities: number[], wanted: readonly InLine[]): boolean {
  const last = priorities.length - 1;
  let level = 0;
  for (let i = last; i >= 0; i--) {
    if (i < last) level += stepBetween(wanted, i);
    priorities[i] = level;
  }
  if (level > HIGHEST - LOWEST) return false;
  const shift = Math.floor(level / 2);
  for (let i = 0; i <= last; i++) priorities[i] -= shift;
  return true;
}
