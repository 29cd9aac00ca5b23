import { HATCH, liquidFill, liquidInk, type Tint } from "@/components/strip/tint";
import { formatVolume } from "@/lib/format";

type VesselProps = {
  /** Its liquid; waste without one. */
  liquid?: { letter: string; tint: Tint };
  ml: number;
  fullMl: number;
  /** What is still needed of it, or will still come to the waste: a notch at that level. */
  stillMl?: number;
  label: string;
};

const HEIGHT = 64;
const WIDTH = 34;
const SHOULDER = 12;
const OUTLINE = `M11 .5V5L1.5 12.5V${HEIGHT - 1}H${WIDTH}V12.5L24.5 5V.5Z`;

/** A bottle with the level of what is in it, to scale with its own size. */
export function Vessel({ liquid, ml, fullMl, stillMl, label }: VesselProps) {
  const level = (volume: number) => SHOULDER + (HEIGHT - SHOULDER - 1) * (1 - Math.min(1, Math.max(0, fullMl > 0 ? volume / fullMl : 0)));
  const top = level(ml);
  const inside = top < 38;
  const letterStyle = liquid && inside ? { fill: liquidInk(liquid.tint), ...(liquid.tint > 1 && { paintOrder: "stroke", stroke: `var(--liq${liquid.tint})`, strokeWidth: 5 }) } : { fill: "var(--ink2)" };
  const notch = stillMl === undefined ? undefined : level(liquid ? stillMl : ml + stillMl);
  return (
    <svg width="48" height={HEIGHT} role="img" aria-label={`${label}: ${formatVolume(ml)} of ${formatVolume(fullMl)}`}>
      <path d={OUTLINE} fill="var(--sheet)" />
      <rect x="1.5" y={top} width={WIDTH - 1.5} height={HEIGHT - 1 - top} fill={liquid ? liquidFill(liquid.tint) : HATCH} />
      <path d={OUTLINE} fill="none" stroke="var(--ink2)" strokeWidth="1.1" />
      {notch !== undefined && <path d={`M${WIDTH + 1} ${notch}h8`} stroke="var(--ink)" strokeWidth="2" />}
      {liquid && (
        <text x={WIDTH / 2 + 0.7} y={inside ? 56 : 34} textAnchor="middle" fontSize="12" fontWeight="650" style={letterStyle}>
          {liquid.letter}
        </text>
      )}
    </svg>
  );
}
