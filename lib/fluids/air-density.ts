import { requireRange } from "./fluid-range-error";

const molarGasConstant = 8.314472;
const molarMassWater = 0.01801528;

export const airDensityRange = { minC: 15, maxC: 27, minPa: 60_000, maxPa: 110_000 };

export type AirState = {
  /** °C, 15 to 27. */
  temperatureC: number;
  /** Pa, 60 000 to 110 000. */
  pressurePa: number;
  /** Relative humidity in percent, 0 to 100. */
  humidityPercent: number;
  /** Mole fraction of carbon dioxide; 0.0004 unless measured. */
  carbonDioxide?: number;
};

/**
 * Density of moist air.
 *
 *   ρ = p Mₐ / (Z R T) · [1 − x_v (1 − M_v/Mₐ)]
 *
 * with the water vapour fraction x_v from humidity, enhancement factor and saturation pressure, and the compressibility Z.
 *
 * @returns ρ in kg/m³; relative standard uncertainty of the formula 22·10⁻⁶.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: Picard, Davis, Gläser, Fujii, Metrologia 45 (2008) 149 (CIPM-2007), equation (1) and appendix A.
 */
export function airDensity(state: AirState): number {
  const { temperatureC: t, pressurePa: p, humidityPercent, carbonDioxide = 0.0004 } = state;
  requireRange("Density of air", "temperature / °C", t, airDensityRange.minC, airDensityRange.maxC);
  requireRange("Density of air", "pressure / Pa", p, airDensityRange.minPa, airDensityRange.maxPa);
  requireRange("Density of air", "relative humidity / %", humidityPercent, 0, 100);
  requireRange("Density of air", "mole fraction of carbon dioxide", carbonDioxide, 0, 0.01);

  const T = t + 273.15;
  const saturationPa = Math.exp(1.2378847e-5 * T * T - 1.9121316e-2 * T + 33.93711047 - 6.3431645e3 / T);
  const enhancement = 1.00062 + 3.14e-8 * p + 5.6e-7 * t * t;
  const vapour = ((humidityPercent / 100) * enhancement * saturationPa) / p;
  const perT = p / T;
  const compressibility =
    1 -
    perT *
      (1.58123e-6 -
        2.9331e-8 * t +
        1.1043e-10 * t * t +
        (5.707e-6 - 2.051e-8 * t) * vapour +
        (1.9898e-4 - 2.376e-6 * t) * vapour * vapour) +
    perT * perT * (1.83e-11 - 0.765e-8 * vapour * vapour);
  const molarMass = (28.96546 + 12.011 * (carbonDioxide - 0.0004)) * 1e-3;
  return ((p * molarMass) / (compressibility * molarGasConstant * T)) * (1 - vapour * (1 - molarMassWater / molarMass));
}
