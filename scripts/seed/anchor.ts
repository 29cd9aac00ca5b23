import { nextLocalTime } from "@/lib/protocol/local-time";

export const ZONE = "Europe/London";

const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;

/** Times of the demo, all counted from the moment at which its seeding first began. */
export type Anchor = {
  /** Rigs, bottles and people were there before the first campaign. */
  setUpAt: Date;
  /** Clocks of the rigs at their first hello. */
  clockStart: { north: Date; south: Date; cold: Date };
  tonight: Date;
};

/** The six weeks end yesterday morning; the other two campaigns began some days and some hours ago. */
export function anchorOf(begunAt: Date): Anchor {
  const at = (ms: number) => new Date(ms);
  const now = begunAt.getTime();
  const north = nextLocalTime({ time: "05:30" }, now - 44 * DAY_MS, ZONE);
  return {
    setUpAt: at(north - 3 * DAY_MS),
    clockStart: { north: at(north), south: at(now - 52 * HOUR_MS), cold: at(now - 41 * HOUR_MS) },
    tonight: at(nextLocalTime({ time: "20:00" }, now, ZONE)),
  };
}

/** A little before, for what people did ahead of a start. */
export const before = (time: Date, minutes: number): Date => new Date(time.getTime() - minutes * 60_000);
