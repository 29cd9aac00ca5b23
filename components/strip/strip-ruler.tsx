"use client";

import { formatTime } from "@/lib/format-time";
import { useWidth } from "@/components/charts/use-width";
import { layoutRuler, layoutWeeks, type RulerDay, type RulerInput } from "./ruler-geometry";

/** Weekends and day lines behind a strip. */
export function DayGrid({ days, top, height }: { days: readonly RulerDay[]; top: number; height: number }) {
  return (
    <g aria-hidden="true">
      {days.map(({ x0, x1, weekend }) => weekend && <rect key={`w${x0}`} x={x0} y={top} width={Math.max(0, x1 - x0)} height={height} fill="var(--weekend)" />)}
      {days.map(({ x0, monday }) => <path key={x0} d={`M${x0} ${top}v${height}`} stroke={monday ? "var(--rule)" : "var(--grid)"} />)}
    </g>
  );
}

export function DayLabels({ days, y }: { days: readonly RulerDay[]; y: number }) {
  return (
    <g aria-hidden="true">
      {days.map(({ x0, label }) =>
        label ? <text key={x0} x={label.x} y={y} textAnchor={label.anchor} className={label.strong ? "strong" : undefined}>{label.text}</text> : null,
      )}
    </g>
  );
}

/** The ink flag of the present. */
export function NowFlag({ x, y, text }: { x: number; y: number; text: string }) {
  const half = Math.max(22, text.length * 4 + 10);
  return (
    <g aria-hidden="true">
      <rect x={x - half} y={y} width={half * 2} height="19" rx="2" fill="var(--ink)" />
      <text className="strong" x={x} y={y + 13.5} textAnchor="middle" style={{ fill: "var(--onink)" }}>{text}</text>
    </g>
  );
}

/** One ruler over several strips to the same time axis. */
export function StripRuler({ from, to, zone, now }: RulerInput) {
  const [ref, width] = useWidth();
  const x = now === undefined ? undefined : ((Date.parse(now) - Date.parse(from)) / (Date.parse(to) - Date.parse(from))) * width;
  return (
    <div ref={ref} className="strip" style={{ height: 24 }}>
      {width > 0 && (
        <svg width={width} height={24} role="img" aria-label="Days">
          <DayLabels days={layoutRuler({ from, to, zone, now }, width)} y={17} />
          {x !== undefined && x >= 0 && x <= width && now !== undefined && <NowFlag x={x} y={3} text={formatTime(now, zone)} />}
        </svg>
      )}
    </div>
  );
}

/** Weeks since the start, over strips that begin at their own start. */
export function WeekRuler({ from, to }: { from: string; to: string }) {
  const [ref, width] = useWidth();
  const weeks = width > 0 ? layoutWeeks(from, to, width) : [];
  return (
    <div ref={ref} className="strip" style={{ height: 24 }}>
      {width > 0 && (
        <svg width={width} height={24} role="img" aria-label="Weeks since the start">
          {weeks.map(({ x, text }, i) => {
            const last = i === weeks.length - 1 && i > 0;
            return <text key={x} x={last ? Math.min(width, x + 12) : x} y={18} textAnchor={i === 0 ? "start" : last ? "end" : "middle"}>{last ? `${text} weeks` : text}</text>;
          })}
        </svg>
      )}
    </div>
  );
}
