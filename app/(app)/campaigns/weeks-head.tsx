import { layoutWeeks } from "@/components/strip/ruler-geometry";

const EPOCH = "1970-01-01T00:00:00Z";

/** Over the strips of a list: a number a week from their start. Places are shares of the column's width. */
export function WeeksHead({ spanMs }: { spanMs: number }) {
  const weeks = layoutWeeks(EPOCH, new Date(spanMs).toISOString(), 100).filter((_, i, all) => i % Math.max(1, Math.ceil(all.length / 8)) === 0);
  const last = weeks.length - 1;
  return (
    <span className="relative block h-4">
      {weeks.map(({ x, text }, i) => (
        <span key={text} className={`absolute whitespace-nowrap ${i > 0 ? "-translate-x-1/2" : ""}`} style={{ left: `${x}%` }}>
          {i === last && i > 0 && x < 90 ? `${text} ${text === "1" ? "week" : "weeks"}` : text}
        </span>
      ))}
    </span>
  );
}
