"use client";

import { scaleLog } from "@visx/scale";
import { useMemo, useState, type KeyboardEvent, type ReactNode } from "react";
import { PowerOfTen } from "@/components/ui/quantity";
import { formatCount } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";
import { HATCH } from "@/components/strip/tint";
import { AxisX, AxisY } from "./axes";
import { isDrawable, logRange, notMeasured, placeLabels, type DeviationCurve, type DeviationPoint } from "./deviation";
import { acrossShifts, CurveDrawing, labelWishes, marksTaken, NoiseGuides, noiseGuides } from "./deviation-curves";
import { NoiseLanes, NOISE_LANE_PX } from "./noise-lanes";
import { Plot } from "./plot";
import { QuantityLabel, quantityText, type PlotQuantity } from "./plot-quantity";
import { decadeTicks, minorTicks } from "./ticks";
import { useWidth } from "./use-width";

export type DeviationChartProps = {
  label: string;
  /** What it means for the next protocol. */
  sentence?: ReactNode;
  file: string;
  curves: readonly DeviationCurve[];
  /** What is on the y axis; default σ_y(τ). */
  quantity?: PlotQuantity;
  height?: number;
  /** The companion of a campaign page: no lanes, fewer words. */
  small?: boolean;
  /** In words, for table and CSV: `68 %`. */
  band?: string;
};

const READABLE: readonly [number, string][] = [[3600, "1 h"], [86_400, "1 d"], [604_800, "1 week"]];
const ALLAN: PlotQuantity = { symbol: "σ", sub: "y" };

/** Allan deviation against averaging time, both logarithmic: bands, slopes, and from phase to phase apart from inside phases. */
export function DeviationChart({ label, sentence, file, curves, quantity = ALLAN, height = 430, small, band = "68 %" }: DeviationChartProps) {
  const [ref, width] = useWidth();
  const [cursor, setCursor] = useState<number>();
  const drawn = useMemo(() => curves.map((curve) => ({ ...curve, within: curve.within.filter(isDrawable), across: curve.across?.filter(isDrawable) ?? [] })), [curves]);
  const points = useMemo(() => drawn.flatMap((curve) => [...curve.within.map((point) => ({ curve, point, across: false })), ...curve.across.map((point) => ({ curve, point, across: true }))]), [drawn]);

  const left = 52;
  const right = width - 6;
  const top = 22;
  const bottom = small ? height - 50 : height;
  const lanes = small || drawn.every(({ within }) => within.every(({ noise }) => !noise)) ? 0 : drawn.length * NOISE_LANE_PX + 40;
  const full = bottom + 44 + lanes;

  const x = scaleLog<number>({ domain: logRange(points.map(({ point }) => point.tau), small ? 4 : 3, 1.6), range: [left, right] });
  const y = scaleLog<number>({ domain: logRange(points.flatMap(({ point }) => [point.deviation, point.low, point.high]), 1.5, 2.4), range: [bottom, top] });
  const [x0 = 1, x1 = 10] = x.domain();
  const [y0 = 1, y1 = 10] = y.domain();
  const empty = notMeasured(drawn);
  const shifts = acrossShifts(drawn, x);
  const guides = noiseGuides({ curves: drawn, x, y, right, small });
  const places = placeLabels(labelWishes(drawn, shifts, x, y), { right, bottom: bottom - 4, taken: [...guides, ...marksTaken(drawn, shifts, x, y)] });

  function onKeyDown(event: KeyboardEvent) {
    const last = points.length - 1;
    if (event.key === "Escape") setCursor(undefined);
    const next = { ArrowRight: Math.min(last, (cursor ?? -1) + 1), ArrowLeft: Math.max(0, (cursor ?? last + 1) - 1), Home: 0, End: last }[event.key];
    if (next === undefined || last < 0) return;
    event.preventDefault();
    setCursor(next);
  }

  const here = cursor === undefined ? undefined : points[cursor];
  return (
    <Plot label={label} sentence={sentence} file={file} twin={() => deviationTwin(drawn, quantity, band)} reading={here && <Reading point={here.point} name={here.curve.label} across={here.across} band={band} />}>
      <div ref={ref} style={{ minHeight: full }}>
        {width > 0 && (
          <svg width={width} height={full} role="img" aria-label={label} tabIndex={0} onKeyDown={onKeyDown} onBlur={() => setCursor(undefined)}>
            <AxisX scale={x} ticks={decadeTicks(x0, x1)} minor={minorTicks(x0, x1)} top={bottom} gridFrom={top} powers />
            <AxisY scale={y} ticks={decadeTicks(y0, y1, 5)} left={left} right={right} powers />
            {READABLE.filter(([tau]) => tau > x0 && tau < x1).map(([tau, text]) => (
              <g key={text}>
                <path d={`M${x(tau)} ${top - 2}V${bottom}`} stroke="var(--rule2)" strokeDasharray="1 4" />
                <text x={x(tau)} y={top - 8} textAnchor="middle">{text}</text>
              </g>
            ))}
            {empty && (
              <g>
                <rect x={x(empty[0])} y={top} width={Math.max(0, x(empty[1]) - x(empty[0]))} height={bottom - top} fill={HATCH} opacity=".6" />
                {x(empty[1]) - x(empty[0]) > 60 && <text className="halo" x={(x(empty[0]) + x(empty[1])) / 2} y={bottom - 10} textAnchor="middle">not measured</text>}
              </g>
            )}
            <NoiseGuides guides={guides} />
            {drawn.map((curve, i) => <CurveDrawing key={curve.id} curve={curve} x={x} y={y} top={top} place={places[i]} acrossPlace={places[drawn.length + i]} shift={shifts[i] ?? 0} />)}
            {drawn.some(({ across }) => across.length > 0) && !small && <text className="halo" x={right} y={top + 12} textAnchor="end">hollow: from phase to phase</text>}
            {here && <circle cx={x(here.point.tau)} cy={y(here.point.deviation)} r="6.5" fill="none" stroke="var(--ink)" strokeWidth="1.6" />}
            <QuantityLabel quantity={quantity} x={left} y={8} />
            <QuantityLabel quantity={{ words: "averaging time", symbol: "τ", unit: "s" }} x={right} y={bottom + 36} anchor="end" />
            {lanes > 0 && <NoiseLanes curves={drawn} x={x} left={left} top={bottom + 56} />}
          </svg>
        )}
      </div>
    </Plot>
  );
}

function Reading({ point, name, across, band }: { point: DeviationPoint; name: string; across: boolean; band: string }) {
  return (
    <>
      <b>{name}{across && ", phase to phase"}</b>, {formatDuration(point.tau)}:&ensp;<span className="value"><PowerOfTen value={point.deviation} decimals={2} /></span>,{" "}
      {band} from <PowerOfTen value={point.low} decimals={2} /> to <PowerOfTen value={point.high} decimals={2} />, {formatCount(point.n)} terms{point.noise && `, ${point.noise}${point.assumed ? "*" : ""}`}
    </>
  );
}

function deviationTwin(curves: readonly DeviationCurve[], quantity: PlotQuantity, band: string) {
  const right = true;
  const row = (curve: DeviationCurve, view: string) => ({ tau, deviation, low, high, n, noise, assumed }: DeviationPoint) => [curve.label, view, tau, deviation, low, high, n, `${noise ?? ""}${assumed ? "*" : ""}`];
  return {
    columns: [{ head: "curve" }, { head: "view" }, { head: "τ / s", right }, { head: quantityText(quantity), right }, { head: `${band} from`, right }, { head: `${band} to`, right }, { head: "terms", right }, { head: "noise" }],
    rows: curves.flatMap((curve) => [...curve.within.map(row(curve, "within phases")), ...(curve.across ?? []).map(row(curve, "phase to phase"))]),
  };
}
