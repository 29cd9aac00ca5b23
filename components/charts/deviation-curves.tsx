import type { DeviationCurve, DeviationPoint, LabelPlace, LabelWish } from "./deviation";
import { dashOf, PointMark, penOf } from "./pens";

type LogScale = (value: number) => number;
type ScaleWithDomain = LogScale & { domain: () => number[] };

type CurveProps = { curve: DeviationCurve; x: LogScale; y: LogScale; top: number; place?: LabelPlace; acrossPlace?: LabelPlace; /** Pixels by which hollow marks step aside. */ shift: number };

const path = (points: readonly DeviationPoint[], x: LogScale, y: LogScale, key: "deviation" | "low" | "high") => points.map((point) => `${x(point.tau).toFixed(1)} ${y(point[key]).toFixed(1)}`);

/** Band, line and filled marks inside phases; hollow marks with bars from phase to phase, never joined. */
export function CurveDrawing({ curve, x, y, top, place, acrossPlace, shift }: CurveProps) {
  const { colour } = penOf(curve.pen);
  const { within, across = [] } = curve;
  const aside = (tau: number) => x(tau) + shift;
  const banded = within.filter(({ low, high }) => low > 0 && Number.isFinite(high));
  return (
    <g>
      {banded.length > 1 && <path d={`M${[...path(banded, x, y, "high"), ...path(banded, x, y, "low").reverse()].join("L")}Z`} fill={colour} opacity=".15" />}
      {within.length > 1 && <path d={`M${path(within, x, y, "deviation").join("L")}`} fill="none" stroke={colour} strokeWidth="2" strokeDasharray={dashOf(curve)} />}
      {within.map(({ tau, deviation }) => <PointMark key={tau} pen={curve.pen} x={x(tau)} y={y(deviation)} />)}
      {place && <text className="label strong halo" x={place.x} y={place.y} textAnchor={place.anchor}>{curve.label}</text>}
      {across.map(({ tau, deviation, low, high }) => (
        <g key={tau}>
          {low > 0 && <path d={`M${aside(tau)} ${y(low)}V${Math.max(top, y(high))}`} stroke={colour} strokeWidth="1.4" opacity=".75" />}
          <PointMark pen={curve.pen} x={aside(tau)} y={y(deviation)} r={4} hollow />
        </g>
      ))}
      {acrossPlace && <text className="label halo" x={acrossPlace.x} y={acrossPlace.y} textAnchor={acrossPlace.anchor}>{curve.label}</text>}
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

/** Labels at the ends of curves: those inside phases first, then those from phase to phase. */
export function labelWishes(curves: readonly DeviationCurve[], shifts: readonly number[], x: LogScale, y: LogScale): (LabelWish | undefined)[] {
  const wish = (text: string, end: DeviationPoint | undefined, gap: number, shift: number) => end && { x: x(end.tau) + shift, y: y(end.deviation) + 4, text, gap };
  return [
    ...curves.map(({ label, within }) => wish(label, within.at(-1), 9, 0)),
    ...curves.map(({ label, across }, i) => wish(label, across?.at(-1), 10, shifts[i] ?? 0)),
  ];
}

/** What the marks themselves cover, as wide as two letters. */
export function marksTaken(curves: readonly DeviationCurve[], shifts: readonly number[], x: LogScale, y: LogScale): (LabelPlace & { text: string })[] {
  const mark = ({ tau, deviation }: DeviationPoint, shift: number) => ({ x: x(tau) + shift - 6, y: y(deviation) + 4, anchor: "start" as const, text: "··" });
  return curves.flatMap(({ within, across = [] }, i) => [...within.map((point) => mark(point, 0)), ...across.map((point) => mark(point, shifts[i] ?? 0))]);
}

/** `endShare`: height of the end as a share of the plot; without one the guide hangs under the first points. */
const GUIDES: readonly { slope: number; text: string; endShare?: number; inSmall?: boolean }[] = [
  { slope: -0.5, text: "white, −½", inSmall: true },
  { slope: 0, text: "flicker, 0", endShare: 0.43 },
  { slope: 0.5, text: "random walk, +½", endShare: 0.36 },
  { slope: 1, text: "drift, +1", endShare: 0.22, inSmall: true },
];

type GuidesProps = { curves: readonly DeviationCurve[]; x: ScaleWithDomain; y: ScaleWithDomain; right: number; small?: boolean };
type Guide = LabelPlace & { d: string; text: string };

/** Dotted slopes with the noise each stands for: white under the first points, the others low at the right. */
export function noiseGuides({ curves, x, y, right, small }: GuidesProps): Guide[] {
  const [x0 = 1, x1 = 10] = x.domain();
  const [y0 = 1, y1 = 10] = y.domain();
  const firstPoints = curves.flatMap(({ within }) => within.slice(0, 1).map(({ deviation }) => deviation));
  const underFirst = firstPoints.length > 0 ? Math.min(...firstPoints) / 2 : y0 * 2;
  const atShare = (share: number) => y0 * (y1 / y0) ** share;
  return GUIDES.filter(({ inSmall }) => inSmall || !small).flatMap(({ slope, text, endShare }): Guide[] => {
    const ends = endShare === undefined
      ? clipDown({ from: x0 * 1.2, start: underFirst, to: Math.min(x0 * 18, x1 / 2), slope, floor: y0 * 1.15 })
      : clipUp({ from: x1 / Math.min(9, (x1 / x0) ** 0.3) / 1.3, to: x1 / 1.3, end: atShare(endShare), slope, floor: y0 });
    if (!ends) return [];
    const [from, start, to, end] = ends;
    return [
      {
        text: small ? `slope ${text.split(", ")[1] ?? ""}` : text,
        d: `M${x(from).toFixed(1)} ${y(start).toFixed(1)}L${x(to).toFixed(1)} ${y(end).toFixed(1)}`,
        x: endShare === undefined ? x(to) + 6 : Math.min(x(to), right),
        y: y(end) + (slope < 0 ? 4 : slope === 0 ? -6 : 15),
        anchor: endShare === undefined ? "start" : "end",
      },
    ];
  });
}

export function NoiseGuides({ guides }: { guides: readonly Guide[] }) {
  return (
    <g>
      {guides.map(({ d, text, anchor, ...place }) => (
        <g key={text}>
          <path d={d} stroke="var(--rule3)" strokeDasharray="1 3" fill="none" />
          <text className="halo" {...place} textAnchor={anchor}>{text}</text>
        </g>
      ))}
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
