import { noiseStretches, type DeviationCurve } from "./deviation";
import { dashOf, penOf } from "./pens";

export const NOISE_LANE_PX = 30;

type NoiseLanesProps = { curves: readonly DeviationCurve[]; x: (tau: number) => number; left: number; top: number };

/** Under the plot, on its x: which noise rules in which stretch of averaging time, one lane a curve. */
export function NoiseLanes({ curves, x, left, top }: NoiseLanesProps) {
  return (
    <g>
      <text className="label" x={left} y={top}>noise by stretch</text>
      {curves.map((curve, i) => {
        const y = top + 16 + i * NOISE_LANE_PX;
        const { colour } = penOf(curve.pen);
        return (
          <g key={curve.id}>
            {[...noiseStretches(curve.within), ...noiseStretches(curve.across ?? [])].map(({ from, to, noise }) => {
              const x0 = Math.max(left, x(from)) + 1.5;
              const x1 = x(to) - 1.5;
              return (
                <g key={`${from}-${noise}`}>
                  <path d={`M${x0} ${y}H${x1}`} stroke={colour} strokeWidth="2" strokeDasharray={dashOf(curve)} />
                  <path d={`M${x0} ${y - 4}v8M${x1} ${y - 4}v8`} stroke={colour} />
                  <text className="halo" x={(x0 + x1) / 2} y={y + 16} textAnchor="middle" style={{ fill: "var(--ink)" }}>{noise}</text>
                </g>
              );
            })}
            <text className="strong" x={left - 10} y={y + 4} textAnchor="end">{curve.label.split(",")[0]}</text>
          </g>
        );
      })}
    </g>
  );
}
