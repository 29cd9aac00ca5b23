import type { CampaignItem } from "@/lib/campaigns/answers";
import { formatDayTime, formatPlusMinus } from "@/lib/format-time";

/** When a campaign ends or ended, over its range or what there is to say instead. `asOf` tells the year that need not be named. */
export function endOf(campaign: CampaignItem, asOf: number): { text: string; note?: string } {
  const { state, expectedEnd, timeZone, endedAt, endedClock, startAt, word } = campaign;
  const time = (at: string) => formatDayTime(at, timeZone, asOf);
  if (endedAt) return { text: time(endedClock ?? endedAt) };
  if (expectedEnd) return { text: time(expectedEnd.at), note: formatPlusMinus((Date.parse(expectedEnd.latest) - Date.parse(expectedEnd.earliest)) / 2000) };
  if (state === "held") return { text: "unknown", note: `while ${word}` };
  if (state === "queued") return { text: startAt ? `from ${time(startAt)}` : "not begun", note: "in line" };
  if (state === "draft") return { text: "not queued" };
  return { text: "unknown" };
}
