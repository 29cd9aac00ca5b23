import { polynomial } from "./polynomial";
import { requireRange } from "./fluid-range-error";

const aroundTwenty = [785.5, -0.91209104, -1.1482993e-3, -3.5294e-6];

export const propanolDensityRange = { minC: 0, maxC: 40 };

/**
 * Density of pure 2-propanol at atmospheric pressure.
 *
 *   ρ = 785.5 − 0.91209(t − 20) − 1.1483·10⁻³(t − 20)² − 3.53·10⁻⁶(t − 20)³
 *
 * @param temperatureC t in °C, 0 to 40.
 * @returns ρ in kg/m³; 1.5 kg/m³, the spread between published correlations and handbook values.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: value at 20 °C from the CRC Handbook; dependence on temperature from the VDI Heat Atlas correlation (PPDS), here as a
 * cubic that follows it within 0.002 kg/m³. The handbook's 780.9 at 25 °C comes out.
 */
export function propanolDensity(temperatureC: number): number {
  const { minC, maxC } = propanolDensityRange;
  requireRange("Density of 2-propanol", "temperature / °C", temperatureC, minC, maxC);
  return polynomial(aroundTwenty, temperatureC - 20);
}
