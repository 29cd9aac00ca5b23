import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { formatAgo, formatDate, formatDay, formatDayTime, formatDuration, formatDurationInWords, formatPlusMinus, formatRecent, formatTime, localDaysBetween, localParts, startOfLocalDay } from "@/lib/format-time";

const zone = "Europe/Berlin";
const now = "2026-05-14T07:42:00Z";
const plain = (text: string) => text.replace(/[\u00a0\u2009]/g, " ");

describe("times of day", () => {
  it("shows the wall clock of the zone, whatever the machine's zone is", () => {
    expect(formatTime("2026-05-14T04:18:00Z", zone)).toBe("06:18");
    expect(formatTime("2026-05-14T04:18:00Z", "Asia/Kathmandu")).toBe("10:03");
  });
  it("gives midnight as 00:00", () => expect(formatTime("2026-05-13T22:00:00Z", zone)).toBe("00:00"));
  it("names the day, and the year only when it is another", () => {
    expect(formatDay(now, zone, now)).toBe("Thu 14 May");
    expect(formatDay("2025-09-30T12:00:00Z", zone, now)).toBe("Tue 30 Sep 2025");
    expect(formatDayTime("2026-05-19T15:50:00Z", zone, now)).toBe("Tue 19 May 17:50");
    expect(formatDate("2026-05-04T12:00:00Z", zone)).toBe("4 May");
  });
  it("shortens what is recent", () => {
    expect(formatRecent("2026-05-14T06:15:00Z", zone, now)).toBe("Today 08:15");
    expect(formatRecent("2026-05-13T12:59:00Z", zone, now)).toBe("Wed 14:59");
    expect(formatRecent("2026-05-04T00:10:00Z", zone, now)).toBe("Mon 4 May 02:10");
  });
  it("refuses a time that is none", () => expect(() => formatTime("tomorrow", zone)).toThrow(RangeError));
});

describe("spans", () => {
  it("uses at most two units", () => {
    expect(plain(formatDuration(4))).toBe("4 s");
    expect(plain(formatDuration(59.6))).toBe("1 min");
    expect(plain(formatDuration(12_240))).toBe("3 h 24 min");
    expect(plain(formatDuration(47.99 * 3600))).toBe("47 h 59 min");
    expect(plain(formatDuration(9 * 86_400 + 5 * 3600))).toBe("9 d 5 h");
  });
  it("writes them out in sentences", () => {
    expect(plain(formatDurationInWords(9 * 86_400 + 5 * 3600))).toBe("9 days 5 hours");
    expect(plain(formatDurationInWords(86_400))).toBe("1 day");
    expect(plain(formatDurationInWords(3660))).toBe("1 hour 1 minute");
  });
  it("says how long ago or ahead", () => {
    expect(plain(formatAgo("2026-05-14T07:41:56Z", now))).toBe("4 s ago");
    expect(plain(formatAgo("2026-05-14T11:50:00Z", now))).toBe("in 4 h 8 min");
    expect(formatAgo(now, now)).toBe("now");
  });
  it("gives half a range in whole units", () => expect(plain(formatPlusMinus(3 * 3600))).toBe("± 3 h"));
});

describe("local days", () => {
  it("has a day of 23 hours in spring and of 25 in autumn", () => {
    const spring = localDaysBetween("2026-03-28T12:00:00Z", "2026-03-30T12:00:00Z", zone);
    expect((spring[1]! - spring[0]!) / 3_600_000).toBe(23);
    const autumn = localDaysBetween("2026-10-24T12:00:00Z", "2026-10-26T12:00:00Z", zone);
    expect((autumn[1]! - autumn[0]!) / 3_600_000).toBe(25);
  });
  it("begins a day without a midnight at the first instant after the gap", () => {
    // Chile, 6 September 2026: 00:00 becomes 01:00 (UTC−4 to UTC−3)
    expect(new Date(startOfLocalDay("2026-09-06T15:00:00Z", "America/Santiago")).toISOString()).toBe("2026-09-06T04:00:00.000Z");
  });
  it("gives each start of a day as 00:00 of that day, one a day", () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 20_000 }), fc.integer({ min: 1, max: 40 }), (hours, span) => {
        const from = Date.UTC(2025, 0, 1) + hours * 3_600_000;
        const days = localDaysBetween(from, from + span * 86_400_000, zone);
        expect(Math.abs(days.length - span)).toBeLessThanOrEqual(1);
        for (const day of days) expect(localParts(day, zone)).toMatchObject({ hour: 0, minute: 0, second: 0 });
      }),
    );
  });
});
