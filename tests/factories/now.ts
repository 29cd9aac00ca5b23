/** The present of every test that does not care which: Thu 14 May 2026, 08:00 UTC. */
export const now = new Date("2026-05-14T08:00:00Z");

export const HOUR_MS = 3_600_000;
export const DAY_MS = 24 * HOUR_MS;

/** A time so many hours after (or, negative, before) `now`. */
export const hours = (h: number): Date => new Date(now.getTime() + h * HOUR_MS);

let count = 0;
let place = 0;

/** For test files that share a database: the numbers and letters of each begin elsewhere. */
export function countAtPlace(placeOfFile: number): void {
  place = placeOfFile;
  count = place * 1000;
}

export const placeOfFile = (): number => place;

/** A number that no other record of this test file has: for names that must be unique. */
export const next = (): number => ++count;
