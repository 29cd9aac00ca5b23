import { requireRange } from "./fluid-range-error";

const a1 = -3.983035;
const a2 = 301.797;
const a3 = 522528.9;
const a4 = 69.34881;
const a5 = 999.97495;

export const waterDensityRange = { minC: 0, maxC: 40 };

/**
 * Density of air-free water of ocean isotopic composition at 101 325 Pa.
 *
 *   ρ = a₅ · [1 − (t + a₁)²(t + a₂) / (a₃(t + a₄))]
 *
 * @param temperatureC Temperature t in °C (ITS-90), 0 to 40.
 * @returns ρ in kg/m³; standard uncertainty of the formula below 0.001 kg/m³.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Tap water differs in a₅ (isotopes) by up to some 0.01 kg/m³; dissolved air lowers ρ by at most 0.005 kg/m³ and is not included.
 * Source: Tanaka, Girard, Davis, Peuto, Bignell, Metrologia 38 (2001) 301, equation (1).
 */
export function waterDensity(temperatureC: number): number {
  requireRange("Density of water", "temperature / °C", temperatureC, waterDensityRange.minC, waterDensityRange.maxC);
  const t = temperatureC;
  return a5 * (1 - ((t + a1) ** 2 * (t + a2)) / (a3 * (t + a4)));
}
