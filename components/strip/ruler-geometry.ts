/** Days over a strip: Mondays bold with the month, weekends shaded, every second or seventh day when days are narrow. Pure. */
import { localDaysBetween, localParts } from "@/lib/format-time";

export type RulerDay = { x0: number; x1: number; weekend: boolean; monday: boolean; label?: { text: string; x: number; anchor: "start" | "middle"; strong: boolean } };

export type RulerInput = { from: string; to: string; zone: string; now?: string };

export const NARROWEST_DAY_PX = 30;
const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];
const tenth = (n: number) => Math.round(n * 10) / 10;

export function layoutRuler({ from, to, zone, now }: RulerInput, width: number): RulerDay[] {
  const start = Date.parse(from);
  const end = Date.parse(to);
  const x = (at: number) => ((at - start) / (end - start)) * width;
  const perDay = (86_400_000 / (end - start)) * width;
  const every = perDay >= NARROWEST_DAY_PX ? 1 : perDay * 2 >= NARROWEST_DAY_PX ? 2 : 7;
  const nowX = now === undefined ? undefined : x(Date.parse(now));
  const inside = nowX !== undefined && nowX >= 0 && nowX <= width ? nowX : undefined;

  const midnights = localDaysBetween(from, to, zone);
  const weeksApart = Math.max(1, Math.ceil(64 / (perDay * 7)));
  let mondays = 0;
  const days = midnights.map((midnight, i): RulerDay => {
    const { day, month, weekday } = localParts(midnight, zone);
    const monday = weekday === 1;
    const x0 = x(midnight);
    const next = midnights[i + 1] ?? midnight + 86_400_000;
    const common = { x0: tenth(x0), x1: tenth(Math.min(width, x(next))), weekend: weekday === 6 || weekday === 0, monday };

    const due = every === 1 || (every === 2 ? Math.round(midnight / 86_400_000) % 2 === 0 : monday && mondays++ % weeksApart === 0);
    const middle = every === 7 ? x0 + 14 : x0 + perDay / 2;
    const underFlag = inside !== undefined && Math.abs(middle - inside) <= (monday ? 50 : 38);
    const cut = x0 + perDay * Math.min(every, 2) * 0.6 > width || (every === 7 && x0 + 40 > width);
    if (!due || underFlag || cut) return common;
    const named = every === 7 || monday || day === 1;
    return {
      ...common,
      label: { text: named ? `${day} ${MONTHS[month - 1]}` : String(day), x: tenth(every === 7 ? x0 + 4 : middle), anchor: every === 7 ? "start" : "middle", strong: monday },
    };
  });
  return withBrokenFirstDay(days, from, zone, x(midnights[0] ?? end));
}

/** Days are drawn from midnight on; what lies before the first midnight is shaded too when it is a weekend. */
function withBrokenFirstDay(days: RulerDay[], from: string, zone: string, x1: number): RulerDay[] {
  const { weekday } = localParts(from, zone);
  return x1 > 0 ? [{ x0: 0, x1: tenth(x1), weekend: weekday === 6 || weekday === 0, monday: false }, ...days] : days;
}

export type RulerWeek = { x: number; text: string };

/** A line a week from the start, for strips that begin at their own start. */
export function layoutWeeks(from: string, to: string, width: number): RulerWeek[] {
  const span = Date.parse(to) - Date.parse(from);
  const week = 7 * 86_400_000;
  const px = (week / span) * width;
  const every = Math.max(1, Math.ceil(28 / px));
  const weeks: RulerWeek[] = [];
  for (let n = 0; n * week <= span; n += every) weeks.push({ x: tenth((n * week * width) / span), text: n === 0 ? "Run" : String(n) });
  return weeks;
}
