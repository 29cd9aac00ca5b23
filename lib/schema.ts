/** Pieces that many schemas share; ids and pages are in `lib/http`. */
import { z } from "zod";

/** RFC 3339 with an offset; kept in UTC. */
export const instant = z.iso.datetime({ offset: true }).transform((value) => new Date(value)).pipe(z.date());

/** A time in an answer. */
export const time = z.iso.datetime();

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
