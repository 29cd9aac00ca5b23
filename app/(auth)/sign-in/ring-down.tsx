import { wireInFluid, type Fluid } from "./wire-in-fluid";

/** A tungsten wire of 0.1 mm, 1 kHz in vacuum. */
const WIRE = { radiusM: 5e-5, densityKgM3: 19_300, vacuumHz: 1000 };

const MEDIA: readonly { name: string; fluid: Fluid; stroke: string; width: number }[] = [
  { name: "air", fluid: { densityKgM3: 1.2, viscosityPaS: 1.82e-5 }, stroke: "var(--ink)", width: 1.1 },
  { name: "water", fluid: { densityKgM3: 998.207, viscosityPaS: 1.0016e-3 }, stroke: "var(--liq1-line)", width: 1.25 },
  { name: "oil", fluid: { densityKgM3: 860, viscosityPaS: 8e-3 }, stroke: "var(--liq3-line)", width: 1.5 },
];

const WIDTH = 1120;
const ROW = 96;
const SWING = 46;
const SHOWN_S = 0.12;
const POINTS_PER_SWING = 18;

/** One wire let go in air, water and oil, all to one time scale and from one deflection. */
export function RingDown() {
  const rows = MEDIA.map((medium, i) => ({ ...medium, ...wireInFluid(WIRE, medium.fluid), y: ROW * i + SWING + 2 }));
  const said = rows.map(({ name, q }) => `${name}, Q ${Math.round(q)}`).join("; ");
  return (
    <svg viewBox={`0 0 ${WIDTH} ${ROW * MEDIA.length}`} role="img" aria-label={`Ring-down of one wire: ${said}`}>
      {rows.map(({ name, f0Hz, q, y, stroke, width }) => (
        <g key={name}>
          <path d={swing(f0Hz, q, y)} fill="none" stroke={stroke} strokeWidth={width} strokeLinejoin="round" vectorEffect="non-scaling-stroke" />
          <text x={WIDTH} y={y - 10} textAnchor="end">{name}, <tspan className="q">Q</tspan> {Math.round(q)}</text>
        </g>
      ))}
    </svg>
  );
}

/** x(t) = cos(2πf₀t) e^(−πf₀t/Q); rounding keeps the text of server and browser the same. */
function swing(f0Hz: number, q: number, y: number): string {
  const n = Math.ceil(f0Hz * SHOWN_S * POINTS_PER_SWING);
  const points = Array.from({ length: n + 1 }, (_, k) => {
    const t = (k / n) * SHOWN_S;
    const x = Math.cos(2 * Math.PI * f0Hz * t) * Math.exp((-Math.PI * f0Hz * t) / q);
    return `${((k / n) * WIDTH).toFixed(1)} ${(y - SWING * x).toFixed(1)}`;
  });
  return `M${points.join("L")}`;
}
