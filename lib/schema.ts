/** Pieces that many schemas share; ids and pages are in `lib/http`. */
import { z } from "zod";

/** RFC 3339 has four digits for a year; an offset can lead beyond them. */
const FIRST = new Date("0001-01-01T00:00:00Z");
const LAST = new Date("9999-12-31T23:59:59.999Z");

/** RFC 3339 with an offset; kept in UTC. */
export const instant = z.iso
  .datetime({ offset: true })
  .transform((value) => new Date(value))
  .pipe(z.date().min(FIRST, "lies before the year 1").max(LAST, "lies after the year 9999"));

/** A time in an answer or a cursor. */
export const time = z.iso.datetime().refine((text) => new Date(text) >= FIRST, "lies before the year 1");

/** Text that a person typed, without the blanks around it. */
export const words = (max: number) => z.string().trim().min(1, "is empty").max(max, `is longer than ${max} characters`);

export const created = z.object({ id: z.string() });

/** A name of the IANA time zone database that this machine knows. */
export const timeZoneName = words(100).refine(isTimeZone, "is no IANA time zone, such as Europe/Berlin");

function isTimeZone(name: string): boolean {
  try {
    return name !== "" && new Intl.DateTimeFormat("en", { timeZone: name }).resolvedOptions().timeZone !== "";
  } catch {
    return false;
  }
}
