import { jointProblem } from "@/lib/numerics/drift/joint-problem";
import type { Compensated } from "@/lib/numerics/temperature/compensated";

/** Density of air to which air references are brought, kg/m³: the convention of OIML D 28 and R 111. */
export const referenceAirDensity = 1.2;

/** What a regression of references on air density needs at least. */
export const fewestReferences = 20;
export const leastSpan = 0.01;

/** df0/dρ in air, in units of the values per kg/m³. */
export type AirDensitySlope = { value: number; u: number };

export type AirDensityCorrection =
  | { basis: "calibration" | "regression"; slope: AirDensitySlope; spanShare: number; corrected: Compensated }
  | { basis: "none"; because: "too few references" | "density hardly changes" | "density goes with drift or temperature"; spanShare: number };

/**
 * Air references brought to an air density of 1.2 kg/m³, so that weather is not read as residue:
 *
 *   y − k (ρ − 1.2), k = df0/dρ
 *
 * k comes from the calibration where it is given, else from the regression of the references on density, fitted together
 * with drift, known steps and, where given, temperature; that needs at least 20 references whose
 * densities span 1 %. Else nothing is corrected, and the reason said.
 *
 * @param atDays Times of the references in days, rising.
 * @param values f0 (or Q) of each.
 * @param densityKgM3 Air density at each, from `airDensity`.
 * @param densityU Standard uncertainty of each that is independent from one to the next, kg/m³.
 * @param commonDensityU Standard uncertainty common to all, kg/m³: barometer, thermometer, formula. 0 by default.
 * @param slope From calibration, in units of the values per kg/m³.
 * @param temperatureC Sensor temperature at each, °C: only for the regression.
 * @param steps Places of the first value after a known step: only for the regression.
 * @returns Common sources of the corrected values: the slope and the density.
 * @throws RangeError if lengths differ, times do not rise or a value is not finite.
 *
 * Source: CIPM-2007 density, Picard et al., Metrologia 45 (2008) 149; fit as `glsFit`. The least numbers are our choice.
 */
export function airDensityCorrection(input: {
  atDays: Float64Array;
  values: Float64Array;
  densityKgM3: Float64Array;
  densityU?: Float64Array;
  commonDensityU?: number;
  slope?: AirDensitySlope;
  temperatureC?: Float64Array;
  steps?: readonly number[];
}): AirDensityCorrection {
  const { values, densityKgM3, densityU, slope } = input;
  if ([densityKgM3, densityU].some((one) => one && (one.length !== values.length || !one.every(Number.isFinite)))) {
    throw new RangeError("there must be one finite air density for each value");
  }
  const span = densityKgM3.reduce((most, one) => Math.max(most, one), -Infinity) - densityKgM3.reduce((least, one) => Math.min(least, one), Infinity);
  const spanShare = values.length > 0 ? span / referenceAirDensity : 0;
  if (slope) return { basis: "calibration", slope, spanShare, corrected: corrected(input, slope) };
  if (values.length < fewestReferences) return { basis: "none", because: "too few references", spanShare };
  if (spanShare < leastSpan) return { basis: "none", because: "density hardly changes", spanShare };
  const found = regressed(input);
  if (!found) return { basis: "none", because: "density goes with drift or temperature", spanShare };
  return { basis: "regression", slope: found, spanShare, corrected: corrected(input, found) };
}

function regressed(input: Parameters<typeof airDensityCorrection>[0]): AirDensitySlope | undefined {
  const problem = jointProblem(input);
  const temperature = input.temperatureC && problem.varies([input.temperatureC]) ? [input.temperatureC] : [];
  const columns = [...temperature, input.densityKgM3];
  if (!problem.varies(columns)) return undefined;
  const { coefficients, covariance } = problem.fit(columns);
  return { value: coefficients[coefficients.length - 1], u: Math.sqrt(covariance[covariance.length - 1]) };
}

function corrected(
  { values, densityKgM3, densityU, commonDensityU = 0 }: Parameters<typeof airDensityCorrection>[0],
  { value: k, u }: AirDensitySlope,
): Compensated {
  const excess = densityKgM3.map((density) => density - referenceAirDensity);
  return {
    values: values.map((value, i) => value - k * excess[i]),
    independentU: values.map((_, i) => Math.abs(k) * (densityU?.[i] ?? 0)),
    sources: ["density slope", "density"],
    sensitivities: [excess.map((one) => -one), values.map(() => -k)],
    covariance: Float64Array.of(u ** 2, 0, 0, commonDensityU ** 2),
  };
}
