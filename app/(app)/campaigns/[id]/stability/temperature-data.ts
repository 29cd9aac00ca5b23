import type { DriftAnswer } from "@/lib/analysis/schema";
import type { Shown } from "./drift-data";

const DAY_MS = 86_400_000;
const CURVE_POINTS = 40;

type Point = { x: number; y: number; u?: number; left?: boolean; name?: string };
type Line = { x: number; y: number; low?: number; high?: number };

/** Phase values as measured, less the drift of the joint fit, against temperature in mK from the reference, and the fitted curve with its 95 % band. */
export function againstTemperature(raw: DriftAnswer, compensated: DriftAnswer, { scale }: Shown) {
  const { compensation } = compensated;
  if (!compensation?.applied || compensation.referenceC === null || compensation.driftPerDay === null) return undefined;
  const { referenceC, driftPerDay, terms } = compensation;
  const term = (name: string) => terms.find((one) => one.name === name);
  const [b1, b2] = [term("linear")?.value ?? 0, term("quadratic")?.value ?? 0];
  const [u1, u2] = [term("linear")?.u ?? 0, term("quadratic")?.u ?? 0];
  const start = compensated.from === null ? -Infinity : Date.parse(compensated.from);
  const own = raw.values.filter(({ at, temperatureC }) => typeof temperatureC === "number" && Date.parse(at) >= start);
  const theta = own.map(({ temperatureC }) => (temperatureC as number) - referenceC);
  const curve = (t: number) => b1 * t + b2 * t ** 2;
  const less = own.map(({ at, value }) => value - (driftPerDay * (Date.parse(at) - start)) / DAY_MS);
  const level = less.reduce((sum, value, i) => sum + (value - curve(theta[i])) / less.length, 0);
  const [low, high] = [Math.min(...theta), Math.max(...theta)];
  const points: Point[] = own.map(({ u, cycle }, i) => ({ x: theta[i] * 1000, y: (less[i] - level) * scale, u: (u ?? 0) * scale, name: `Cycle ${cycle}` }));
  const line: Line[] = Array.from({ length: CURVE_POINTS + 1 }, (_, k) => {
    const t = low + ((high - low) * k) / CURVE_POINTS;
    const half = 1.96 * Math.hypot(u1 * t, u2 * t ** 2);
    return { x: t * 1000, y: curve(t) * scale, low: (curve(t) - half) * scale, high: (curve(t) + half) * scale };
  });
  return {
    referenceC,
    series: [
      { id: "values", label: "phase values", pen: "points", points },
      { id: "fit", label: "coefficient", pen: "ink", line },
    ],
  };
}
