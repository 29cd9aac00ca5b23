import { requireRange } from "./fluid-range-error";

const amplitudes = [280.68, 511.45, 61.131, 0.45903];
const exponents = [-1.9, -7.7, -19.6, -40.0];

export const waterViscosityRange = { minC: 0, maxC: 100 };

/**
 * Dynamic viscosity of liquid water at 0.1 MPa.
 *
 *   η / µPa·s = Σ aᵢ (T/300 K)^bᵢ
 *
 * @param temperatureC Temperature in °C, 0 to 100. (The source goes from −20 °C, metastable, to 110 °C.)
 * @returns η in mPa·s; expanded uncertainty 0.17 % at 20 °C (ISO/TR 3666), about 1 % at the ends.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: IAPWS SR6-08(2011), equation (7), a fit of the correlation R12-08 at this pressure.
 */
export function waterViscosity(temperatureC: number): number {
  requireRange("Viscosity of water", "temperature / °C", temperatureC, waterViscosityRange.minC, waterViscosityRange.maxC);
  return waterViscosityAtK(temperatureC + 273.15);
}

/** As `waterViscosity`, over the whole range of the source: 253.15 to 383.15 K. mPa·s. */
export function waterViscosityAtK(temperatureK: number): number {
  requireRange("Viscosity of water", "temperature / K", temperatureK, 253.15, 383.15);
  const reduced = temperatureK / 300;
  let microPascalSeconds = 0;
  for (let i = 0; i < 4; i++) microPascalSeconds += amplitudes[i] * reduced ** exponents[i];
  return microPascalSeconds / 1000;
}
