const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;

export type LocalDate = { year: number; month: number; day: number };

/**
 * The instant at which a clock in `timeZone` first shows this local date and time.
 *
 * A local time that a change of clocks leaves out means the first instant after the gap; one that comes twice means
 * the first. `hour` may be 24 and `day` may run over the month's end, as in the end of a day.
 *
 * @returns Milliseconds since 1970 UTC.
 */
export function instantOfLocalTime(
  { year, month, day }: LocalDate,
  { hour, minute }: { hour: number; minute: number },
  timeZone: string,
): number {
  const asUtc = Date.UTC(year, month - 1, day, hour, minute);
  const readings = [asUtc - DAY_MS, asUtc + DAY_MS]
    .map((around) => asUtc - offsetMs(around, timeZone))
    .filter((instant) => instant + offsetMs(instant, timeZone) === asUtc);
  return readings.length > 0 ? Math.min(...readings) : endOfGap(asUtc, timeZone);
}

/** The first instant later than `afterMs` at which the local clock shows `time`, on `weekday` (1 is Monday) where given. */
export function nextLocalTime(
  { weekday, time }: { weekday?: number; time: string },
  afterMs: number,
  timeZone: string,
): number {
  const [hour, minute] = time.split(":").map(Number);
  const today = localDate(afterMs, timeZone);
  for (let ahead = 0; ahead <= 8; ahead++) {
    const date = { ...today, day: today.day + ahead };
    const isWanted = weekday === undefined || isoWeekday(date) === weekday;
    const instant = isWanted ? instantOfLocalTime(date, { hour, minute }, timeZone) : -Infinity;
    if (instant > afterMs) return instant;
  }
  throw new RangeError(`no ${time} on weekday ${weekday} within nine days after ${new Date(afterMs).toISOString()}`);
}

/** The instant at which a local date, `YYYY-MM-DD`, is over: 24:00. */
export function endOfLocalDate(date: string, timeZone: string): number {
  const [year, month, day] = date.split("-").map(Number);
  return instantOfLocalTime({ year, month, day }, { hour: 24, minute: 0 }, timeZone);
}

function isoWeekday({ year, month, day }: LocalDate): number {
  return new Date(Date.UTC(year, month - 1, day)).getUTCDay() || 7;
}

function localDate(instantMs: number, timeZone: string): LocalDate {
  const local = new Date(instantMs + offsetMs(instantMs, timeZone));
  return { year: local.getUTCFullYear(), month: local.getUTCMonth() + 1, day: local.getUTCDate() };
}

/** Halves the two days around a time that no clock shows until the jump over it is found, to the millisecond. */
function endOfGap(asUtc: number, timeZone: string): number {
  let before = asUtc - 2 * DAY_MS;
  let after = asUtc + 2 * DAY_MS;
  while (after - before > 1) {
    const middle = Math.floor((before + after) / 2);
    if (middle + offsetMs(middle, timeZone) < asUtc) before = middle;
    else after = middle;
  }
  return after;
}

const formats = new Map<string, Intl.DateTimeFormat>();

/** What the local clock is ahead of UTC at an instant, in milliseconds. */
export function offsetMs(instantMs: number, timeZone: string): number {
  let format = formats.get(timeZone);
  if (!format) {
    format = new Intl.DateTimeFormat("en-US", {
      timeZone,
      hourCycle: "h23",
      year: "numeric",
      month: "numeric",
      day: "numeric",
      hour: "numeric",
      minute: "numeric",
      second: "numeric",
    });
    formats.set(timeZone, format);
  }
  const whole = Math.floor(instantMs / 1000) * 1000;
  const part: Partial<Record<Intl.DateTimeFormatPartTypes, string>> = {};
  for (const { type, value } of format.formatToParts(whole)) part[type] = value;
  const local = Date.UTC(
    Number(part.year),
    Number(part.month) - 1,
    Number(part.day),
    Number(part.hour),
    Number(part.minute),
    Number(part.second),
  );
  return local - whole;
}
