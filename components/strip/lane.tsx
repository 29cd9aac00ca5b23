"use client";

import { useMemo, type ReactNode } from "react";
import { useWidth } from "@/components/charts/use-width";
import { layoutLane, type LaneInput } from "./lane-geometry";
import { layoutRuler } from "./ruler-geometry";
import { StripDrawing } from "./strip-drawing";
import { DayGrid } from "./strip-ruler";
import { HATCH } from "./tint";

type LaneProps = LaneInput & {
  label: string;
  zone: string;
  /** Over the strip of a run: its name. */
  nameOf: (key: string) => ReactNode;
  /** Laid over the strip of a run, as large as it: something to hold it by. */
  handleOf?: (key: string, scale: { pxPerMs: number }) => ReactNode;
  /** The same in words, for those who do not see it. */
  children: ReactNode;
};

/** What a rig does over some weeks: runs one after the other, the likely range of each end, blocked time, and where a person is needed. */
export function Lane({ label, zone, nameOf, handleOf, children, from, to, now, runs, blocked, rings }: LaneProps) {
  const [ref, width] = useWidth();
  const layout = useMemo(() => (width > 0 ? layoutLane({ from, to, now, runs, blocked, rings }, width) : undefined), [from, to, now, runs, blocked, rings, width]);
  const days = useMemo(() => (width > 0 ? layoutRuler({ from, to, zone }, width) : []), [from, to, zone, width]);
  const pxPerMs = width / (Date.parse(to) - Date.parse(from));
  return (
    <div ref={ref} className="strip lane" role="group" aria-label={label} style={{ minHeight: layout?.height ?? 75 }}>
      {layout && (
        <>
          <svg width={width} height={layout.height} aria-hidden="true">
            <DayGrid days={days} top={0} height={layout.height} />
            {layout.blocked.map(({ id, x0, x1, why, hasRoom }) => (
              <g key={id}>
                <rect x={x0} y={layout.roof} width={Math.max(1, x1 - x0)} height={layout.base - layout.roof} fill={HATCH} />
                {hasRoom && <text x={x0} y={layout.roof - 8} className="halo">{why}</text>}
              </g>
            ))}
            {layout.runs.map(({ key, layout: strip }) => <StripDrawing key={key} layout={strip} haltOpen={runs.find((run) => run.key === key)?.halt?.open ?? false} />)}
            {layout.runs.map(({ key, whisker }) => whisker && <Whisker key={key} {...whisker} y={layout.base + 9} />)}
            {layout.rings.map(({ x, label: text, hasRoom }) => (
              <g key={`${x}-${text}`}>
                <circle cx={x} cy={layout.height - 11} r="4.5" fill="none" stroke="var(--ink)" strokeWidth="1.6" />
                {hasRoom && <text x={x + 9} y={layout.height - 7} className="halo">{text}</text>}
              </g>
            ))}
            {layout.nowX !== undefined && <path d={`M${layout.nowX} 0V${layout.height}`} stroke="var(--ink)" strokeWidth="1.5" />}
          </svg>
          {layout.runs.map(({ key, x0, x1, nameWidth }) => (
            <div key={key}>
              {nameWidth > 0 && <div className="lane-name" style={{ left: x0, maxWidth: nameWidth }}>{nameOf(key)}</div>}
              {handleOf && <div className="lane-handle" style={{ left: x0, width: Math.max(12, x1 - x0), top: layout.roof, height: layout.base - layout.roof + 4 }}>{handleOf(key, { pxPerMs })}</div>}
            </div>
          ))}
        </>
      )}
      <div className="visually-hidden">{children}</div>
    </div>
  );
}

function Whisker({ x0, x1, y, cutLeft, cutRight }: { x0: number; x1: number; y: number; cutLeft: boolean; cutRight: boolean }) {
  const end = (x: number) => `M${x} ${y - 4}v8`;
  return <path d={`M${x0} ${y}H${Math.max(x1, x0 + 1)}${cutLeft ? "" : end(x0)}${cutRight ? "" : end(Math.max(x1, x0 + 1))}`} stroke="var(--ink2)" strokeWidth="1.25" fill="none" />;
}
