/** The run strip as plain shapes: linear time along x, the liquid's level along y. Pure; pixels in and out. */
import { shortCycleBlocks, type StripBlock } from "./short-cycles";
import { stripMeasures, type SegmentKind, type StripInput, type StripMeasures, type StripSegment, type StripSize } from "./strip-input";
import { layoutTrace, type TraceLayout } from "./trace-geometry";

export type StripShape = {
  kind: SegmentKind;
  planned: boolean;
  /** Place in `segments`. */
  index: number;
  x0: number;
  x1: number;
  /** Outline, closed unless it is a line. */
  d: string;
  /** The line on the baseline or the top, where the kind has one beside its area. */
  line?: string;
  tint?: 1 | 2 | 3;
};

export type StripLetter = { x: number; y: number; text: string; tint: 1 | 2 | 3; planned: boolean };

export type StripLayout = {
  width: number;
  measures: StripMeasures;
  base: number;
  roof: number;
  shapes: StripShape[];
  letters: StripLetter[];
  /** Numbers of cycles under the baseline, campaign size only. */
  cycles: { x: number; text: string; current: boolean }[];
  blocks: StripBlock[];
  nowX?: number;
  haltX?: number;
  /** From here on nothing is known. */
  silentX?: number;
  trace?: TraceLayout;
};

export const toTenth = (n: number): number => Math.round(n * 10) / 10;

export const timeScale = (from: string, to: string, width: number) => {
  const start = Date.parse(from);
  const span = Date.parse(to) - start;
  if (!(span > 0)) throw new RangeError(`a strip ends after it begins: ${from} to ${to}`);
  return (at: string | number) => (((typeof at === "number" ? at : Date.parse(at)) - start) / span) * width;
};

export function layoutStrip(input: StripInput, width: number, size: StripSize, own?: Partial<StripMeasures>): StripLayout {
  const x = timeScale(input.from, input.to, width);
  const hasTrace = Boolean(input.trace && input.trace.length > 0);
  const measures = { ...stripMeasures(size, width, hasTrace), ...own };
  const base = measures.top + measures.level;
  const roof = measures.top + measures.headroom;
  const nowX = input.now === undefined ? undefined : x(input.now);
  const silentX = input.silentSince === undefined ? undefined : x(input.silentSince);

  const blocks = shortCycleBlocks(input.segments, x, { now: nowX, width });
  const inBlock = new Set(blocks.flatMap(({ indices }) => indices));

  const shapes: StripShape[] = [];
  const letters: StripLetter[] = [];
  input.segments.forEach((segment, index) => {
    if (inBlock.has(index)) return;
    for (const piece of piecesOf(segment, x, nowX, silentX)) {
      const shape = shapeOf(segment, index, piece, { base, roof, width });
      if (!shape) continue;
      shapes.push(shape);
      const letter = letterOf(segment, piece, shape, measures, base, roof);
      if (letter) letters.push(letter);
    }
  });

  return {
    width,
    measures,
    base,
    roof,
    shapes,
    letters,
    cycles: measures.large && blocks.length === 0 ? cycleNumbers(input.segments, x, width, nowX) : [],
    blocks,
    nowX: nowX !== undefined && nowX >= 0 && nowX <= width ? toTenth(nowX) : undefined,
    haltX: input.halt ? toTenth(x(input.halt.at)) : undefined,
    silentX: silentX !== undefined && silentX <= width ? toTenth(Math.max(0, silentX)) : undefined,
    trace: hasTrace ? layoutTrace(input, { x, width, top: base + measures.traceGap, height: measures.trace, end: Math.min(nowX ?? Infinity, silentX ?? Infinity) }) : undefined,
  };
}

/** Drawn at least 1 to 2 px wide, so that every cycle keeps its shape. */
const KEEPS_WIDTH: ReadonlySet<SegmentKind> = new Set<SegmentKind>(["fill", "liquid", "clean", "dry"]);

type Piece = { from: number; to: number; planned: boolean; split: boolean };

/** A phase that runs is split at now; what the agent has not told yet is not drawn. */
function piecesOf(segment: StripSegment, x: (at: string) => number, nowX: number | undefined, silentX: number | undefined): Piece[] {
  const from = x(segment.from);
  const to = x(segment.to);
  const known = silentX !== undefined ? Math.min(to, silentX) : to;
  if (known < from || (known === from && to > from && silentX !== undefined)) return [];
  if (segment.planned || nowX === undefined || known <= nowX) return [{ from, to: known, planned: segment.planned === true, split: false }];
  if (from >= nowX) return [{ from, to: known, planned: true, split: false }];
  return [
    { from, to: nowX, planned: false, split: true },
    { from: nowX, to: known, planned: true, split: true },
  ];
}

function shapeOf(segment: StripSegment, index: number, piece: Piece, { base, roof, width }: { base: number; roof: number; width: number }): StripShape | undefined {
  if (piece.to < 0 || piece.from > width) return undefined;
  const x0 = toTenth(Math.max(0, piece.from));
  const x1 = toTenth(Math.min(width, piece.to));
  const common = { kind: segment.kind, planned: piece.planned, index, x0, x1, tint: segment.tint };
  const level = toTenth(base - (base - roof) * 0.6);

  if (segment.kind === "end") {
    return { ...common, d: `M${x0 - 0.75} ${roof}V${base}`, line: `M${x0 - 4} ${roof}V${base}` };
  }
  if (x1 <= x0 && !KEEPS_WIDTH.has(segment.kind)) return undefined;

  switch (segment.kind) {
    case "air":
      return { ...common, d: `M${x0} ${base - 1}H${x1}` };
    case "fill":
      return { ...common, d: `M${x0} ${base}L${toTenth(Math.max(x1, x0 + 1.5))} ${roof}V${base}Z` };
    case "liquid":
      return { ...common, d: box(x0, roof, Math.max(1, x1 - x0), base - roof), line: `M${x0} ${roof + 0.5}H${toTenth(x1 - 0.5)}V${base}` };
    case "clean":
      return { ...common, d: box(x0, level, Math.max(1.5, x1 - x0), base - level) };
    case "dry":
      return { ...common, d: `M${x0} ${level}L${toTenth(Math.max(x1, x0 + 2))} ${base}H${x0}Z` };
    case "held":
      return { ...common, d: box(x0, roof, x1 - x0, base - roof), line: `M${x0 + 0.5} ${base - 1}H${x1}` };
    case "wait":
      return { ...common, d: box(x0, level, x1 - x0, base - level), line: `M${x0 + 0.5} ${base - 1}H${x1}` };
  }
}

const box = (x: number, y: number, w: number, h: number) => `M${x} ${y}h${toTenth(w)}v${toTenth(h)}h${toTenth(-w)}z`;

/** A letter stands where there is room for it; of a phase split at now, on the side that has it. */
function letterOf(segment: StripSegment, piece: Piece, { x0, x1 }: StripShape, measures: StripMeasures, base: number, roof: number): StripLetter | undefined {
  const room = x1 - x0;
  const middle = toTenth((x0 + x1) / 2);
  if (segment.kind === "liquid" && segment.letter && room >= measures.letterFrom && (!piece.split || !piece.planned || room > 40)) {
    return { x: middle, y: toTenth(roof + (base - roof) / 2 + 4), text: segment.letter, tint: segment.tint ?? 1, planned: piece.planned };
  }
  if (segment.kind === "air" && measures.large && room >= 16 && !(piece.split && piece.planned)) {
    return { x: middle, y: base - 6, text: segment.letter ?? "A", tint: 1, planned: true };
  }
  return undefined;
}

/** Under each liquid its cycle, as long as there are 14 px for the number. */
function cycleNumbers(segments: readonly StripSegment[], x: (at: string) => number, width: number, nowX: number | undefined) {
  const numbers: StripLayout["cycles"] = [];
  let lastX = -Infinity;
  for (const { kind, cycle, from, to } of segments) {
    if (kind !== "liquid" || !cycle) continue;
    const middle = (x(from) + x(to)) / 2;
    if (middle < 4 || middle > width - 4 || middle - lastX < 14) continue;
    lastX = middle;
    numbers.push({ x: toTenth(middle), text: String(cycle), current: nowX !== undefined && x(from) <= nowX && nowX < x(to) });
  }
  return numbers;
}
