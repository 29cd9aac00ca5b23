import type { SweepAnswer } from "@/lib/readings/schema";

type Curve = NonNullable<SweepAnswer["curve"]>;
type Parameters = NonNullable<SweepAnswer["parameters"]>;
type Plane = { re: number[]; im: number[] };

export type SweepViews = {
  /** Phase against the drive of the resonance, degrees: 0 at f0 of a velocity readout. */
  phase?: { measured: number[]; fitted: number[] };
  /** Measured less fitted, V; in quadrature only where the sweep has phase. */
  residuals?: { inPhase: number[]; quadrature?: number[] };
  /** Without offset and its slope, V. */
  plane?: { measured: Plane; fitted: Plane };
};

/** What the plots of a sweep show beside its amplitude; empty where nothing was fitted. */
export function sweepViews(curve: Curve, parameters: Parameters): SweepViews {
  const { frequencyHz, measuredV, fittedV, re, im, fittedRe, fittedIm } = curve;
  if (fittedV.length === 0) return {};
  if (!re || !im || !fittedRe || !fittedIm) return { residuals: { inPhase: less(measuredV, fittedV) } };

  const of = (name: Parameters[number]["name"]) => parameters.find((parameter) => parameter.name === name)?.value ?? 0;
  const low = Math.min(...frequencyHz);
  const high = Math.max(...frequencyHz);
  const slope = frequencyHz.map((f) => (high > low ? (f - (low + high) / 2) / (high - low) : 0));
  const free = (part: readonly number[], b: number, c: number) => part.map((value, i) => value - b - c * slope[i]);
  const plane = {
    measured: { re: free(re, of("bRe"), of("cRe")), im: free(im, of("bIm"), of("cIm")) },
    fitted: { re: free(fittedRe, of("bRe"), of("cRe")), im: free(fittedIm, of("bIm"), of("cIm")) },
  };
  const turn = Math.atan2(of("aIm"), of("aRe"));
  const phaseOf = ({ re: x, im: y }: Plane) => x.map((value, i) => (((Math.atan2(y[i], value) - turn) * 180) / Math.PI + 540) % 360 - 180);
  return {
    phase: { measured: phaseOf(plane.measured), fitted: phaseOf(plane.fitted) },
    residuals: { inPhase: less(re, fittedRe), quadrature: less(im, fittedIm) },
    plane,
  };
}

const less = (one: readonly number[], other: readonly number[]) => one.map((value, i) => value - other[i]);

const ARC_POINTS = 120;

/** The resonance circle of a velocity readout between the phases of the fitted curve's ends, V: smooth however few points the sweep has. */
export function resonanceArc(parameters: Parameters, fittedPhase: readonly number[]): { x: number; y: number }[] {
  const of = (name: Parameters[number]["name"]) => parameters.find((parameter) => parameter.name === name)?.value ?? NaN;
  const [re, im] = [of("aRe"), of("aIm")];
  const [first = 0, last = 0] = [fittedPhase[0], fittedPhase[fittedPhase.length - 1]];
  return Array.from({ length: ARC_POINTS + 1 }, (_, k) => {
    const turn = ((first + ((last - first) * k) / ARC_POINTS) * Math.PI) / 180;
    const [c, s] = [Math.cos(turn) ** 2, Math.cos(turn) * Math.sin(turn)];
    return { x: re * c - im * s, y: re * s + im * c };
  });
}

/** Place of the resonance term at f0 and at the two half-power points, without offset, V; of a velocity readout. */
export function halfPowerPoints(parameters: Parameters): { name: string; re: number; im: number }[] {
  const of = (name: Parameters[number]["name"]) => parameters.find((parameter) => parameter.name === name)?.value;
  const [re, im] = [of("aRe"), of("aIm")];
  if (re === undefined || im === undefined) return [];
  // 1/(1 ± i) = (1 ∓ i)/2
  return [
    { name: "f₀", re, im },
    { name: "f₀ + half-width", re: (re + im) / 2, im: (im - re) / 2 },
    { name: "f₀ − half-width", re: (re - im) / 2, im: (im + re) / 2 },
  ];
}

const UNITS = [["V", 1], ["mV", 1e3], ["µV", 1e6]] as const;

/** The unit in which values are numbers of one to three digits. */
export function unitFor(volts: readonly number[]): readonly [string, number] {
  const most = volts.reduce((high, value) => (Number.isFinite(value) ? Math.max(high, Math.abs(value)) : high), 0);
  return UNITS.find(([, scale]) => most * scale >= 1) ?? (most > 0 ? UNITS[2] : UNITS[0]);
}
