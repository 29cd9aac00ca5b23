import { formatNumber, formatShare } from "@/lib/format";

type SweepPreviewProps = { /** In all. */ halfWidths: number; points: number };

const WIDTH = 260;
const HEIGHT = 84;
const TOP = 8;
const BOTTOM = 66;
const CURVE_POINTS = 120;
const MOST_MARKS = 130;

/** Amplitude of a resonance so many half-widths beside its top, as a share of it. */
const amplitude = (x: number): number => 1 / Math.hypot(1, x);

/** What a sweep around the last good fit sees of the resonance: the curve over the span, with a mark a point. */
export function SweepPreview({ halfWidths, points }: SweepPreviewProps) {
  const edge = halfWidths / 2;
  const shown = Math.max(edge * 1.2, 3);
  const x = (value: number) => ((value + shown) / (2 * shown)) * WIDTH;
  const y = (share: number) => BOTTOM - share * (BOTTOM - TOP);
  const curve = Array.from({ length: CURVE_POINTS + 1 }, (_, i) => {
    const at = -shown + (2 * shown * i) / CURVE_POINTS;
    return `${x(at).toFixed(1)} ${y(amplitude(at)).toFixed(1)}`;
  });
  const marks = points <= MOST_MARKS ? Array.from({ length: points }, (_, i) => `M${x(-edge + (halfWidths * i) / (points - 1)).toFixed(1)} ${BOTTOM}v4`).join("") : "";
  const words = `${formatNumber(Math.round(pointsInWidth({ halfWidths, points })))} points lie in the half-power width; at its ends the sweep sees ${formatShare(amplitude(edge))} of the top.`;
  return (
    <figure className="plot col-span-full">
      <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} width={WIDTH} height={HEIGHT} role="img" aria-label={words}>
        <rect x={x(-edge)} y={TOP} width={x(edge) - x(-edge)} height={BOTTOM - TOP} fill="var(--band)" />
        <path d={`M${curve.join("L")}`} fill="none" stroke="var(--ink)" strokeWidth="1.5" />
        <path className="axis-line" d={`M0 ${BOTTOM}H${WIDTH}`} />
        <path d={marks} stroke="var(--ink3)" />
        <text x={x(-edge)} y={HEIGHT - 2} textAnchor="middle">{formatNumber(-edge)}</text>
        <text x={x(0)} y={HEIGHT - 2} textAnchor="middle">half-widths</text>
        <text x={x(edge)} y={HEIGHT - 2} textAnchor="middle">+{formatNumber(edge)}</text>
      </svg>
      <figcaption className="small text-ink2">{words}</figcaption>
    </figure>
  );
}

/** A half-power width is two half-widths. */
const pointsInWidth = ({ halfWidths, points }: SweepPreviewProps): number => Math.min(points, (2 / halfWidths) * (points - 1) + 1);
