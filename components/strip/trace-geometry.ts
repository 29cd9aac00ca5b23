/** The air reference under the strip: a line or a mean per air phase, the limit as a band, nothing drawn through what was not measured. Pure. */
import type { StripInput, TracePoint } from "./strip-input";

export type TracePhase = { points: { x: number; y: number }[]; x0: number; x1: number; meanY: number };

export type TraceLayout = {
  top: number;
  height: number;
  /** The band of the limit, and the line of nought, from the first segment to the present. */
  band?: { x: number; y: number; width: number; height: number };
  zero: { x0: number; x1: number; y: number };
  limitY?: number[];
  phases: TracePhase[];
  /** From phase to phase: a dotted hairline that is not data. */
  joins: string;
  y: (value: number) => number;
  range: [number, number];
};

const tenth = (n: number) => Math.round(n * 10) / 10;

/** The data, and never less than half the limit either way, with 8 % of room. */
export function traceRange(values: readonly number[], limit: number | undefined): [number, number] {
  let low = limit === undefined ? Infinity : -limit / 2;
  let high = limit === undefined ? -Infinity : limit / 2;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (!(low <= high)) return [-1, 1];
  const room = (high - low || Math.abs(high) || 1) * 0.08;
  return [low - room, high + room];
}

type Place = { x: (at: string) => number; width: number; top: number; height: number; end: number };

export function layoutTrace(input: StripInput, { x, width, top, height, end }: Place): TraceLayout {
  const trace = input.trace ?? [];
  const range = traceRange(trace.map(({ value }) => value), input.limit);
  const [low, high] = range;
  const y = (value: number) => tenth(top + height - ((Math.max(low, Math.min(high, value)) - low) / (high - low)) * height);

  const known = input.segments.filter(({ planned }) => !planned);
  const x0 = tenth(Math.max(0, x((known[0] ?? { from: input.from }).from)));
  const x1 = tenth(Math.max(x0, Math.min(width, end, x((known[known.length - 1] ?? { to: input.to }).to))));

  const phases: TracePhase[] = [];
  let joins = "";
  let before: TracePhase | undefined;
  for (const group of byAirPhase(trace, input)) {
    const points = group.map(({ at, value }) => ({ x: tenth(x(at)), y: y(value) }));
    const first = points[0];
    const last = points[points.length - 1];
    if (!first || !last || last.x < 0 || first.x > width) continue;
    const mean = group.reduce((sum, { value }) => sum + value, 0) / group.length;
    const phase = { points, x0: Math.max(0, first.x), x1: tenth(Math.min(width, Math.max(last.x, first.x + 2))), meanY: y(mean) };
    if (before) joins += `M${before.x1} ${before.meanY}L${phase.x0} ${phase.meanY}`;
    phases.push(phase);
    before = phase;
  }

  const { limit } = input;
  return {
    top,
    height,
    band: limit === undefined ? undefined : { x: x0, y: y(limit), width: tenth(x1 - x0), height: tenth(y(-limit) - y(limit)) },
    zero: { x0, x1, y: y(0) },
    limitY: limit === undefined ? undefined : [limit, -limit].filter((value) => value > low && value < high).map(y),
    phases,
    joins,
    y,
    range,
  };
}

/** Points of one air phase belong together; those in none, too, until the next phase begins. */
function byAirPhase(trace: readonly TracePoint[], { segments }: StripInput): TracePoint[][] {
  const starts = segments.filter(({ kind, planned }) => kind === "air" && !planned).map(({ from }) => Date.parse(from));
  const groups: TracePoint[][] = [];
  let phase = 0;
  let lastPhase = -1;
  for (const point of trace) {
    if (!Number.isFinite(point.value)) continue;
    const at = Date.parse(point.at);
    while (phase < starts.length && (starts[phase] ?? Infinity) <= at) phase++;
    if (phase !== lastPhase) groups.push([]);
    lastPhase = phase;
    groups[groups.length - 1]?.push(point);
  }
  return groups;
}
