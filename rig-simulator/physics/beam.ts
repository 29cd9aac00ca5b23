export type Boundary = "clamped-free" | "clamped-clamped" | "clamped-pinned" | "pinned-pinned";

/** Brackets for the first root; the higher ones lie about π apart. */
const start: Record<Boundary, number> = {
  "clamped-free": 1.875,
  "clamped-clamped": 4.73,
  "clamped-pinned": 3.927,
  "pinned-pinned": Math.PI,
};

/**
 * Eigenvalue βₙL of a uniform Euler–Bernoulli beam.
 *
 * Roots of cos x cosh x = −1 (clamped-free), cos x cosh x = 1 (clamped-clamped, free-free), tan x = tanh x (clamped-pinned,
 * free-pinned), sin x = 0 (pinned-pinned), by Newton's method on forms that do not grow with x.
 *
 * @param boundary How the two ends are held.
 * @param mode 1 for the fundamental.
 */
export function beamEigenvalue(boundary: Boundary, mode = 1): number {
  if (!Number.isInteger(mode) || mode < 1) throw new RangeError(`mode must be a whole number ≥ 1, got ${mode}`);
  let x = start[boundary] + (mode - 1) * Math.PI;
  if (boundary === "pinned-pinned") return mode * Math.PI;
  if (boundary === "clamped-free" && mode > 1) x = (mode - 0.5) * Math.PI;
  for (let i = 0; i < 20; i++) {
    const c = Math.cos(x);
    const s = Math.sin(x);
    const sech = 1 / Math.cosh(x);
    const t = Math.tanh(x);
    const [value, slope] =
      boundary === "clamped-free"
        ? [c + sech, -s - sech * t]
        : boundary === "clamped-clamped"
          ? [c - sech, -s + sech * t]
          : [s - c * t, c + s * t - c * sech * sech];
    const step = value / slope;
    x -= step;
    if (Math.abs(step) < 1e-15 * x) break;
  }
  return x;
}

/**
 * Frequency of a beam.
 *
 *   f = (βL)² / (2πL²) · √(EI/μ)
 *
 * @param beam lengthM L in m, stiffnessNm2 EI in N·m², massPerLengthKgM μ in kg/m, eigenvalue βL.
 * @returns f in Hz.
 */
export function beamFrequency(beam: { lengthM: number; stiffnessNm2: number; massPerLengthKgM: number; eigenvalue: number }): number {
  return (beam.eigenvalue ** 2 / (2 * Math.PI * beam.lengthM ** 2)) * Math.sqrt(beam.stiffnessNm2 / beam.massPerLengthKgM);
}
