import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { endOfLocalDate, instantOfLocalTime, nextLocalTime } from "@/lib/protocol/local-time";

const iso = (instantMs: number) => new Date(instantMs).toISOString();
const at = (text: string) => Date.parse(text);

/** Changes of clocks in 2026 as published in the IANA time zone database (europe, northamerica, australasia). */
describe("a local time that the change of clocks leaves out means the first instant after the gap", () => {
  test.each([
    ["Europe/Berlin", "2026-03-29", "02:30", "2026-03-29T01:00:00.000Z"],
    ["America/New_York", "2026-03-08", "02:30", "2026-03-08T07:00:00.000Z"],
    ["Australia/Lord_Howe", "2026-10-04", "02:15", "2026-10-03T15:30:00.000Z"],
  ])("%s %s %s", (timeZone, date, time, expected) => {
    expect(iso(instant(date, time, timeZone))).toBe(expected);
  });
});

describe("a local time that comes twice means the first", () => {
  test.each([
    ["Europe/Berlin", "2026-10-25", "02:30", "2026-10-25T00:30:00.000Z"],
    ["America/New_York", "2026-11-01", "01:30", "2026-11-01T05:30:00.000Z"],
    ["Australia/Lord_Howe", "2026-04-05", "01:45", "2026-04-04T14:45:00.000Z"],
  ])("%s %s %s", (timeZone, date, time, expected) => {
    expect(iso(instant(date, time, timeZone))).toBe(expected);
  });
});

describe("waiting until a local time", () => {
  test.each([
    ["the same day, when it is still to come", "Europe/Berlin", { time: "08:00" }, "2026-01-15T06:59:00Z", "2026-01-15T07:00:00.000Z"],
    ["the day after, when it is that very instant", "Europe/Berlin", { time: "08:00" }, "2026-01-15T07:00:00Z", "2026-01-16T07:00:00.000Z"],
    ["23 hours, over the night the clocks go forward", "Europe/Berlin", { time: "08:00" }, "2026-03-28T07:00:00Z", "2026-03-29T06:00:00.000Z"],
    ["25 hours, over the night they go back", "America/New_York", { time: "08:00" }, "2026-10-31T12:00:00Z", "2026-11-01T13:00:00.000Z"],
    ["24 and a half, on Lord Howe Island", "Australia/Lord_Howe", { time: "08:00" }, "2026-04-03T21:00:00Z", "2026-04-04T21:30:00.000Z"],
    ["a missing time, at the gap's end", "Europe/Berlin", { time: "02:30" }, "2026-03-28T12:00:00Z", "2026-03-29T01:00:00.000Z"],
    ["a doubled time, not its second coming", "Europe/Berlin", { time: "02:30" }, "2026-10-25T00:45:00Z", "2026-10-26T01:30:00.000Z"],
    ["the next Monday", "Europe/Berlin", { weekday: 1, time: "06:30" }, "2026-01-15T12:00:00Z", "2026-01-19T05:30:00.000Z"],
    ["a week, on the right day too late", "Europe/Berlin", { weekday: 4, time: "06:30" }, "2026-01-15T12:00:00Z", "2026-01-22T05:30:00.000Z"],
    ["Sunday, which is 7", "America/New_York", { weekday: 7, time: "00:00" }, "2026-01-15T12:00:00Z", "2026-01-18T05:00:00.000Z"],
  ])("%s", (_, timeZone, until, after, expected) => {
    expect(iso(nextLocalTime(until, at(after), timeZone))).toBe(expected);
  });

  test("always ends later than it began, within eight days and an hour", () => {
    const zones = fc.constantFrom("Europe/Berlin", "America/New_York", "Australia/Lord_Howe", "UTC", "Asia/Kathmandu", "Pacific/Apia");
    fc.assert(
      fc.property(
        zones,
        fc.integer({ min: at("2011-01-01T00:00:00Z"), max: at("2035-01-01T00:00:00Z") }),
        fc.option(fc.integer({ min: 1, max: 7 }), { nil: undefined }),
        fc.integer({ min: 0, max: 24 * 60 - 1 }),
        (timeZone, afterMs, weekday, minute) => {
          const time = `${String(Math.floor(minute / 60)).padStart(2, "0")}:${String(minute % 60).padStart(2, "0")}`;
          const due = nextLocalTime({ weekday, time }, afterMs, timeZone);
          expect(due).toBeGreaterThan(afterMs);
          expect(due - afterMs).toBeLessThanOrEqual((weekday === undefined ? 2 : 8) * 86_400_000 + 3_600_000);
        },
      ),
    );
  });
});

describe("a date ends at 24:00 local", () => {
  test.each([
    ["Europe/Berlin", "2026-03-29", "2026-03-29T22:00:00.000Z"],
    ["America/New_York", "2026-12-31", "2027-01-01T05:00:00.000Z"],
    ["Australia/Lord_Howe", "2026-10-03", "2026-10-03T13:30:00.000Z"],
  ])("%s %s", (timeZone, date, expected) => {
    expect(iso(endOfLocalDate(date, timeZone))).toBe(expected);
  });
});

function instant(date: string, time: string, timeZone: string): number {
  const [year, month, day] = date.split("-").map(Number);
  const [hour, minute] = time.split(":").map(Number);
  return instantOfLocalTime({ year, month, day }, { hour, minute }, timeZone);
}
