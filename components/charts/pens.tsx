import type { Tint } from "@/components/strip/tint";

/** A pen of a plot: colour never alone, always with a dash and a marker of its own. */
export type Pen = "ink" | "points" | "third" | "fourth" | `liquid-${Tint}`;
export type Marker = "circle" | "triangle" | "square";

const PENS: Record<Pen, { colour: string; dash?: string; marker: Marker }> = {
  ink: { colour: "var(--ink)", marker: "circle" },
  points: { colour: "var(--c2)", dash: "7 3", marker: "circle" },
  third: { colour: "var(--c3)", dash: "2 2.5", marker: "triangle" },
  fourth: { colour: "var(--c4)", dash: "7 3 2 3", marker: "square" },
  "liquid-1": { colour: "var(--liq1-line)", marker: "circle" },
  "liquid-2": { colour: "var(--liq2-line)", dash: "7 3", marker: "circle" },
  "liquid-3": { colour: "var(--liq3-line)", dash: "2 2.5", marker: "circle" },
};

export const penOf = (pen: Pen) => PENS[pen];

export type Dash = "solid" | "dashed" | "dotted";
const DASHES: Record<Dash, string | undefined> = { solid: undefined, dashed: "7 3", dotted: "2 2.5" };

/** The pen's own dash, unless another is asked for because two pens of a plot would have the same. */
export const dashOf = ({ pen, dash }: { pen: Pen; dash?: Dash }): string | undefined => (dash ? DASHES[dash] : PENS[pen].dash);

type PointMarkProps = { pen: Pen; x: number; y: number; r?: number; hollow?: boolean; marker?: Marker };

export function PointMark({ pen, x, y, r = 3, hollow, marker = PENS[pen].marker }: PointMarkProps) {
  const { colour } = PENS[pen];
  const look = hollow ? { fill: "var(--paper)", stroke: colour, strokeWidth: 1.6 } : { fill: colour };
  if (marker === "triangle") return <path d={`M${x} ${y - r - 1}l${r + 1} ${2 * r + 1}h${-2 * (r + 1)}z`} {...look} />;
  if (marker === "square") return <rect x={x - r} y={y - r} width={2 * r} height={2 * r} {...look} />;
  return <circle cx={x} cy={y} r={r} {...look} />;
}

/** A legend entry for a marker, in the margin. */
export function MarkerSample({ pen, hollow, line }: { pen: Pen; hollow?: boolean; line?: boolean }) {
  return (
    <svg width="20" height="12" aria-hidden="true">
      {line && <path d="M0 6H20" stroke={PENS[pen].colour} strokeWidth="1.75" strokeDasharray={PENS[pen].dash} />}
      {!line && <PointMark pen={pen} x={10} y={6} hollow={hollow} />}
    </svg>
  );
}
