import { requireRange } from "./fluid-range-error";

const coefficients = {
  ethanol: { A: -2.5972, B: -846.95, C: -24.124, minC: -60, maxC: 75 },
  "2-propanol": { A: -3.305, B: -1009.2, C: 18.917, minC: 0, maxC: 80 },
};

/**
 * Dynamic viscosity of pure ethanol or 2-propanol at atmospheric pressure.
 *
 *   log₁₀(η / mPa·s) = A + B/(C − T)
 *
 * @param substance Which alcohol.
 * @param temperatureC Temperature in °C: ethanol −60 to 75, 2-propanol 0 to 80.
 * @returns η in mPa·s; 2 % for ethanol, 3 % for 2-propanol (spread between published correlations).
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: Viswanath, Natarajan, Data Book on the Viscosity of Liquids (1989), three-constant form. One public copy prints
 * ethanol's C with the wrong sign; the value here agrees with the handbook values.
 */
export function alcoholViscosity(substance: "ethanol" | "2-propanol", temperatureC: number): number {
  const { A, B, C, minC, maxC } = coefficients[substance];
  requireRange(`Viscosity of ${substance}`, "temperature / °C", temperatureC, minC, maxC);
  return 10 ** (A + B / (C - (temperatureC + 273.15)));
}
