import type { DeviationCurve, DeviationPoint } from "./deviation";
import { spreadLabels } from "./deviation";
import { PointMark, penOf } from "./pens";

type LogScale = (value: number) => number;
type ScaleWithDomain = LogScale & { domain: () => number[] };

type CurveProps = { curve: DeviationCurve; x: LogScale; y: LogScale; top: number; labelY?: number };

const path = (points: readonly DeviationPoint[], x: LogScale, y: LogScale, key: "deviation" | "low" | "high") => points.map((point) => `${x(point.tau).toFixed(1)} ${y(point[key]).toFixed(1)}`);

/** Band, line and filled marks inside phases; hollow marks with bars from phase to phase, never joined. */
export function CurveDrawing({ curve, x, y, top, labelY }: CurveProps) {
  const { colour, dash } = penOf(curve.pen);
  const { within, across = [] } = curve;
  const last = within[within.length - 1];
  const lastAcross = across[across.length - 1];
  const banded = within.filter(({ low, high }) => low > 0 && Number.isFinite(high));
  return (
    <g>
      {banded.length > 1 && <path d={`M${[...path(banded, x, y, "high"), ...path(banded, x, y, "low").reverse()].join("L")}Z`} fill={colour} opacity=".15" />}
      {within.length > 1 && <path d={`M${path(within, x, y, "deviation").join("L")}`} fill="none" stroke={colour} strokeWidth="2" strokeDasharray={dash} />}
      {within.map(({ tau, deviation }) => <PointMark key={tau} pen={curve.pen} x={x(tau)} y={y(deviation)} />)}
      {last && <text className="label strong halo" x={x(last.tau) + 9} y={labelY ?? y(last.deviation) + 4}>{curve.label}</text>}
      {across.map(({ tau, deviation, low, high }) => (
        <g key={tau}>
          {low > 0 && <path d={`M${x(tau)} ${y(low)}V${Math.max(top, y(high))}`} stroke={colour} strokeWidth="1.4" opacity=".75" />}
          <PointMark pen={curve.pen} x={x(tau)} y={y(deviation)} r={4} hollow />
        </g>
      ))}
      {lastAcross && <text className="label halo" x={x(lastAcross.tau) + 10} y={y(lastAcross.deviation) + 4}>{curve.label}</text>}
    </g>
  );
}

/** Labels at the ends of curves, moved apart where the ends are close. */
export function labelPlaces(curves: readonly DeviationCurve[], y: LogScale, bottom: number): (number | undefined)[] {
  const ends = curves.map(({ within }) => within[within.length - 1]);
  const drawn = ends.flatMap((end) => (end ? [y(end.deviation) + 4] : []));
  const spread = spreadLabels(drawn, 16, bottom - 4);
  let next = 0;
  return ends.map((end) => (end ? spread[next++] : undefined));
}

const GUIDES: readonly { slope: number; text: string; side: "left" | "right" }[] = [
  { slope: -0.5, text: "white, −½", side: "left" },
  { slope: 0, text: "flicker, 0", side: "right" },
  { slope: 0.5, text: "random walk, +½", side: "right" },
  { slope: 1, text: "drift, +1", side: "right" },
];

type GuidesProps = { curves: readonly DeviationCurve[]; x: ScaleWithDomain; y: ScaleWithDomain; box: { left: number; right: number; top: number; bottom: number }; small?: boolean };

/** Dotted slopes with the noise each stands for, low in the plot where no curve is. */
export function NoiseGuides({ curves, x, y, box, small }: GuidesProps) {
  const [x0 = 1, x1 = 10] = x.domain();
  const [y0 = 1, y1 = 10] = y.domain();
  const lowest = Math.min(...curves.flatMap(({ within }) => within.map(({ deviation }) => deviation)), y1);
  const decadesY = Math.log10(y1 / y0);
  const at = (share: number) => y0 * 10 ** (share * decadesY);
  return (
    <g>
      {GUIDES.filter(({ slope }) => !small || slope === -0.5 || slope === 1).map(({ slope, text, side }) => {
        const [from, to] = side === "left" ? [x0 * 1.25, x0 * 1.25 * Math.min(14, (x1 / x0) ** 0.35)] : [x1 / 1.3 / Math.min(8, (x1 / x0) ** 0.3), x1 / 1.3];
        const start = side === "left" ? Math.max(y0 * 1.1, lowest / 1.9) : at(slope === 0 ? 0.34 : slope === 0.5 ? 0.17 : 0.05);
        const clipped = clipToBox(from, start, to, slope, y0, y1);
        if (!clipped) return null;
        const [endX, endY] = clipped;
        const labelX = Math.min(x(endX) + 6, box.right);
        return (
          <g key={text}>
            <path d={`M${x(from).toFixed(1)} ${y(start).toFixed(1)}L${x(endX).toFixed(1)} ${y(endY).toFixed(1)}`} stroke="var(--rule3)" strokeDasharray="1 3" fill="none" />
            <text className="halo" x={side === "left" ? labelX : x(endX)} y={y(endY) + (side === "left" ? 4 : slope === 0 ? -6 : -5)} textAnchor={side === "left" ? "start" : "end"}>{small ? text.replace(/^\S+ ?\S*, /, "slope ") : text}</text>
          </g>
        );
      })}
    </g>
  );
}

/** The end of a guide, cut where it would leave the plot; nothing when it begins outside. */
function clipToBox(from: number, start: number, to: number, slope: number, y0: number, y1: number): [number, number] | undefined {
  if (!(start >= y0 && start <= y1)) return undefined;
  const end = start * (to / from) ** slope;
  const limit = end > y1 ? y1 : end < y0 ? y0 : undefined;
  return limit === undefined || slope === 0 ? [to, end] : [from * (limit / start) ** (1 / slope), limit];
}
