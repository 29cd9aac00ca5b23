import type { DeviationCurve, DeviationPoint } from "./deviation";
import { spreadLabels } from "./deviation";
import { dashOf, PointMark, penOf } from "./pens";

type LogScale = (value: number) => number;
type ScaleWithDomain = LogScale & { domain: () => number[] };

type CurveProps = { curve: DeviationCurve; x: LogScale; y: LogScale; top: number; labelY?: number; acrossLabelY?: number; /** Pixels by which hollow marks step aside. */ shift: number };

const path = (points: readonly DeviationPoint[], x: LogScale, y: LogScale, key: "deviation" | "low" | "high") => points.map((point) => `${x(point.tau).toFixed(1)} ${y(point[key]).toFixed(1)}`);

/** Band, line and filled marks inside phases; hollow marks with bars from phase to phase, never joined. */
export function CurveDrawing({ curve, x, y, top, labelY, acrossLabelY, shift }: CurveProps) {
  const { colour } = penOf(curve.pen);
  const { within, across = [] } = curve;
  const aside = (tau: number) => x(tau) + shift;
  const last = within[within.length - 1];
  const lastAcross = across[across.length - 1];
  const banded = within.filter(({ low, high }) => low > 0 && Number.isFinite(high));
  return (
    <g>
      {banded.length > 1 && <path d={`M${[...path(banded, x, y, "high"), ...path(banded, x, y, "low").reverse()].join("L")}Z`} fill={colour} opacity=".15" />}
      {within.length > 1 && <path d={`M${path(within, x, y, "deviation").join("L")}`} fill="none" stroke={colour} strokeWidth="2" strokeDasharray={dashOf(curve)} />}
      {within.map(({ tau, deviation }) => <PointMark key={tau} pen={curve.pen} x={x(tau)} y={y(deviation)} />)}
      {last && <text className="label strong halo" x={x(last.tau) + 9} y={labelY ?? y(last.deviation) + 4}>{curve.label}</text>}
      {across.map(({ tau, deviation, low, high }) => (
        <g key={tau}>
          {low > 0 && <path d={`M${aside(tau)} ${y(low)}V${Math.max(top, y(high))}`} stroke={colour} strokeWidth="1.4" opacity=".75" />}
          <PointMark pen={curve.pen} x={aside(tau)} y={y(deviation)} r={4} hollow />
        </g>
      ))}
      {lastAcross && <text className="label halo" x={aside(lastAcross.tau) + 10} y={acrossLabelY}>{curve.label}</text>}
    </g>
  );
}

const APART_PX = 7;

/** Marks of several campaigns at one averaging time stand beside each other: how far each curve steps to the right. */
export function acrossShifts(curves: readonly DeviationCurve[], x: LogScale): number[] {
  return curves.map(({ across = [] }, i) => {
    const crowded = curves.slice(0, i).filter((other) => other.across?.some((b) => across.some((a) => Math.abs(x(a.tau) - x(b.tau)) < APART_PX)));
    return crowded.length * APART_PX;
  });
}

/** Labels at the ends of curves, moved apart where the ends are close. */
export function labelPlaces(ends: readonly (DeviationPoint | undefined)[], x: LogScale, y: LogScale): number[] {
  return spreadLabels(
    ends.map((end) => {
      return end ? { x: x(end.tau), y: y(end.deviation) + 4 } : { x: -Infinity, y: 0 };
    }),
    16,
    70,
  );
}

/** `endShare`: height of the end as a share of the plot; without one the guide hangs under the first points. */
const GUIDES: readonly { slope: number; text: string; endShare?: number; inSmall?: boolean }[] = [
  { slope: -0.5, text: "white, −½", inSmall: true },
  { slope: 0, text: "flicker, 0", endShare: 0.43 },
  { slope: 0.5, text: "random walk, +½", endShare: 0.36 },
  { slope: 1, text: "drift, +1", endShare: 0.22, inSmall: true },
];

type GuidesProps = { curves: readonly DeviationCurve[]; x: ScaleWithDomain; y: ScaleWithDomain; right: number; small?: boolean };

/** Dotted slopes with the noise each stands for: white under the first points, the others low at the right. */
export function NoiseGuides({ curves, x, y, right, small }: GuidesProps) {
  const [x0 = 1, x1 = 10] = x.domain();
  const [y0 = 1, y1 = 10] = y.domain();
  const firstPoints = curves.flatMap(({ within }) => within.slice(0, 1).map(({ deviation }) => deviation));
  const underFirst = firstPoints.length > 0 ? Math.min(...firstPoints) / 2 : y0 * 2;
  const atShare = (share: number) => y0 * (y1 / y0) ** share;
  return (
    <g>
      {GUIDES.filter(({ inSmall }) => inSmall || !small).map(({ slope, text, endShare }) => {
        const ends = endShare === undefined
          ? clipDown({ from: x0 * 1.2, start: underFirst, to: Math.min(x0 * 18, x1 / 2), slope, floor: y0 * 1.15 })
          : clipUp({ from: x1 / Math.min(9, (x1 / x0) ** 0.3) / 1.3, to: x1 / 1.3, end: atShare(endShare), slope, floor: y0 });
        if (!ends) return null;
        const words = small ? `slope ${text.split(", ")[1] ?? ""}` : text;
        const [from, start, to, end] = ends;
        return (
          <g key={text}>
            <path d={`M${x(from).toFixed(1)} ${y(start).toFixed(1)}L${x(to).toFixed(1)} ${y(end).toFixed(1)}`} stroke="var(--rule3)" strokeDasharray="1 3" fill="none" />
            <text className="halo" x={endShare === undefined ? x(to) + 6 : Math.min(x(to), right)} y={y(end) + (slope < 0 ? 4 : slope === 0 ? -6 : 15)} textAnchor={endShare === undefined ? "start" : "end"}>{words}</text>
          </g>
        );
      })}
    </g>
  );
}

type Line = [from: number, start: number, to: number, end: number];

/** From a start down to the floor. */
function clipDown({ from, start, to, slope, floor }: { from: number; start: number; to: number; slope: number; floor: number }): Line | undefined {
  if (start <= floor) return undefined;
  const end = start * (to / from) ** slope;
  return end >= floor ? [from, start, to, end] : [from, start, from * (floor / start) ** (1 / slope), floor];
}

/** Up to an end, from where it comes over the floor. */
function clipUp({ from, to, end, slope, floor }: { from: number; to: number; end: number; slope: number; floor: number }): Line {
  const start = end * (from / to) ** slope;
  return start >= floor ? [from, start, to, end] : [to * (floor / end) ** (1 / slope), floor, to, end];
}
