import { wireInFluid, type Fluid } from "./wire-in-fluid";

/** A tungsten wire of 0.1 mm. */
const WIRE = { radiusM: 5e-5, densityKgM3: 19_300, vacuumHz: 1000, vacuumQ: 1200 };

const MEDIA: readonly { name: string; fluid: Fluid; stroke: string; width: number }[] = [
  { name: "air", fluid: { densityKgM3: 1.2, viscosityPaS: 1.82e-5 }, stroke: "var(--ink)", width: 1.1 },
  { name: "water", fluid: { densityKgM3: 998.207, viscosityPaS: 1.0016e-3 }, stroke: "var(--liq1-line)", width: 1.25 },
  { name: "oil", fluid: { densityKgM3: 860, viscosityPaS: 8e-3 }, stroke: "var(--liq3-line)", width: 1.5 },
];

const LABEL = 20;
const POINTS_PER_SWING = 18;

type Shape = { width: number; rowHeight: number; shownS: number; className: string };

/** One wire let go in air, water and oil, all to one time scale and from one deflection. */
export function RingDown() {
  return (
    <>
      <Drawing width={1120} rowHeight={98} shownS={0.12} className="wide" />
      <Drawing width={358} rowHeight={76} shownS={0.045} className="narrow" />
    </>
  );
}

function Drawing({ width, rowHeight, shownS, className }: Shape) {
  const height = (rowHeight - LABEL) / 2;
  const rows = MEDIA.map((medium, i) => ({ ...medium, ...wireInFluid(WIRE, medium.fluid), y: rowHeight * i + LABEL + height }));
  const said = rows.map(({ name, q }) => `${name}, Q ${Math.round(q)}`).join("; ");
  return (
    <svg className={className} viewBox={`0 0 ${width} ${rowHeight * MEDIA.length + 4}`} role="img" aria-label={`Ring-down of one wire: ${said}`}>
      {rows.map(({ name, f0Hz, q, y, stroke, width: pen }) => (
        <g key={name}>
          <path d={swing({ f0Hz, q, y, width, height, shownS })} fill="none" stroke={stroke} strokeWidth={pen} strokeLinejoin="round" />
          <text x={width} y={y - height * Math.exp((-Math.PI * f0Hz * shownS) / q) - 7} textAnchor="end">
            {name}, <tspan className="q">Q</tspan> {Math.round(q)}
          </text>
        </g>
      ))}
    </svg>
  );
}

type Swing = { f0Hz: number; q: number; y: number; width: number; height: number; shownS: number };

/** x(t) = cos(2πf₀t) e^(−πf₀t/Q). */
function swing({ f0Hz, q, y, width, height, shownS }: Swing): string {
  const n = Math.ceil(f0Hz * shownS * POINTS_PER_SWING);
  const points = Array.from({ length: n + 1 }, (_, k) => {
    const t = (k / n) * shownS;
    const x = Math.cos(2 * Math.PI * f0Hz * t) * Math.exp((-Math.PI * f0Hz * t) / q);
    return `${((k / n) * width).toFixed(1)} ${(y - height * x).toFixed(1)}`;
  });
  return `M${points.join("L")}`;
}
