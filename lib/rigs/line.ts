/** When what waits for a rig will run. Times in milliseconds of the rig's clock. Pure: server and screen place with the same rule. */

/** A time to come with its likely range. */
export type Expected = { at: number; earliest: number; latest: number };

/** A queued campaign by what its place in time follows from. */
export type Waiting = { id: string; startAt: number | null; seconds: number; lowS: number; highS: number };

export type Blocked = { from: number; to: number };

export type Placed = { id: string; from: number; end: Expected };

type Line = {
  /** When the rig is free of what is on it. */
  free: Expected;
  /** In the order of the line. */
  waiting: readonly Waiting[];
  blocked: readonly Blocked[];
};

/**
 * Places a rig's line as the rig takes it: as soon as it is free the first whose start has come, and none begins in blocked time;
 * one whose start lies ahead lets others pass. Ranges add up: the earliest end behind the earliest, the latest behind the latest.
 */
export function placeInLine({ free, waiting, blocked }: Line): Placed[] {
  const windows = blocked.toSorted((a, b) => a.from - b.from);
  const placed: Placed[] = [];
  const left = [...waiting];
  let { at, earliest, latest } = free;
  while (left.length > 0) {
    let from = afterBlocked(at, windows);
    let next = left.findIndex(({ startAt }) => startAt === null || startAt <= from);
    if (next < 0) {
      from = afterBlocked(Math.min(...left.map(({ startAt }) => startAt ?? from)), windows);
      const due = from;
      next = left.findIndex(({ startAt }) => startAt !== null && startAt <= due);
    }
    const [{ id, startAt, seconds, lowS, highS }] = left.splice(next, 1);
    const begin = (freeAt: number) => afterBlocked(Math.max(freeAt, startAt ?? -Infinity), windows);
    earliest = Math.min(begin(earliest), from) + 1000 * Math.min(lowS, seconds);
    latest = Math.max(begin(latest), from) + 1000 * Math.max(highS, seconds);
    at = from + 1000 * seconds;
    placed.push({ id, from, end: { at, earliest, latest } });
  }
  return placed;
}

/** The first time from `at` on that is not blocked. */
export function afterBlocked(at: number, windows: readonly Blocked[]): number {
  let time = at;
  for (const { from, to } of windows) if (from <= time && time < to) time = to;
  return time;
}
