import type { Dash, Pen } from "./pens";

/** One averaging time: deviation with the limits of its band, and how much it rests on. */
export type DeviationPoint = {
  /** s */
  tau: number;
  deviation: number;
  low: number;
  high: number;
  /** Terms in the sum. */
  n: number;
  /** Noise that rules here: `white`, `flicker`, `random walk`, `drift`. */
  noise?: string;
  /** Fewer than 30 averages: the noise is that of the last stretch that had them. */
  assumed?: boolean;
};

export type DeviationCurve = {
  id: string;
  label: string;
  pen: Pen;
  dash?: Dash;
  /** Inside phases: filled marks and a line. */
  within: readonly DeviationPoint[];
  /** From phase to phase: hollow marks with bars, no line. */
  across?: readonly DeviationPoint[];
};

export const isDrawable = ({ tau, deviation }: DeviationPoint): boolean => tau > 0 && deviation > 0 && Number.isFinite(tau) && Number.isFinite(deviation);

/** A log axis that holds the values with room; always at least a decade. */
export function logRange(values: Iterable<number>, room = 1.35, roomBelow = room): [number, number] {
  let low = Infinity;
  let high = 0;
  for (const value of values) {
    if (!(value > 0) || !Number.isFinite(value)) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (low > high) return [1, 10];
  low /= roomBelow;
  high *= room;
  const missing = Math.sqrt(Math.max(1, 10 / (high / low)));
  return [low / missing, high * missing];
}

/** Between the longest averaging time inside a phase and the shortest from phase to phase nothing was measured. */
export function notMeasured(curves: readonly DeviationCurve[]): [number, number] | undefined {
  let longest = 0;
  let shortest = Infinity;
  for (const { within, across = [] } of curves) {
    for (const { tau } of within) longest = Math.max(longest, tau);
    for (const { tau } of across) shortest = Math.min(shortest, tau);
  }
  if (!(longest > 0) || !Number.isFinite(shortest)) return undefined;
  const [from, to] = [longest * 1.22, shortest / 1.22];
  return to > from * 1.15 ? [from, to] : undefined;
}

/** Neighbouring averaging times under one noise, as stretches from half an octave before to half an octave after. */
export function noiseStretches(points: readonly DeviationPoint[]): { from: number; to: number; noise: string }[] {
  const stretches: { from: number; to: number; noise: string }[] = [];
  for (const { tau, noise } of points) {
    if (!noise) continue;
    const last = stretches[stretches.length - 1];
    if (last?.noise === noise) last.to = tau * Math.SQRT2;
    else stretches.push({ from: tau / Math.SQRT2, to: tau * Math.SQRT2, noise });
  }
  return stretches;
}

/** A label beside the point it belongs to. */
export type LabelWish = { x: number; y: number; text: string; /** From the point to the text. */ gap: number };
export type LabelPlace = { x: number; y: number; anchor: "start" | "end" };
type Box = { from: number; to: number; y: number };

const PX_PER_CHARACTER = 6.6;
const APART_PX = 15;

const boxOf = ({ x, y, anchor }: LabelPlace, text: string): Box => {
  const width = text.length * PX_PER_CHARACTER;
  return anchor === "start" ? { from: x, to: x + width, y } : { from: x - width, to: x, y };
};

/**
 * Where labels stand: at the right of their points, or at the left where the plot ends, each moved down until it touches no
 * other and none of `taken`, or up where there is no room below. A label without a point has no place.
 */
export function placeLabels(wishes: readonly (LabelWish | undefined)[], { right, bottom, taken = [] }: { right: number; bottom: number; taken?: readonly (LabelPlace & { text: string })[] }): (LabelPlace | undefined)[] {
  const boxes = taken.map((label) => boxOf(label, label.text));
  const places: (LabelPlace | undefined)[] = wishes.map(() => undefined);
  const order = wishes.flatMap((wish, i) => (wish ? [{ wish, i }] : [])).sort((a, b) => a.wish.y - b.wish.y);
  for (const { wish, i } of order) {
    const atRight: LabelPlace = { x: wish.x + wish.gap, y: wish.y, anchor: "start" };
    const beside: LabelPlace = boxOf(atRight, wish.text).to <= right ? atRight : { x: wish.x - wish.gap, y: wish.y, anchor: "end" };
    const below = moved(beside, wish.text, boxes, 1);
    const place = below.y <= bottom ? below : moved(beside, wish.text, boxes, -1);
    boxes.push(boxOf(place, wish.text));
    places[i] = place;
  }
  return places;
}

/** Down (`1`) or up (`-1`) past every box that it touches. */
function moved(place: LabelPlace, text: string, boxes: readonly Box[], direction: 1 | -1): LabelPlace {
  const { from, to } = boxOf(place, text);
  const near = boxes.filter((box) => box.from < to && box.to > from).map(({ y }) => y);
  const inOrder = near.sort((a, b) => (a - b) * direction);
  return { ...place, y: inOrder.reduce((y, takenY) => (Math.abs(takenY - y) < APART_PX ? takenY + direction * APART_PX : y), place.y) };
}
