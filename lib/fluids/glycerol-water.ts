import { requireRange } from "./fluid-range-error";
import { interpolateCubic } from "./interpolate";

type State = { temperatureC: number; massFraction: number };

export const glycerolDensityRange = { minC: 20, maxC: 30 };

/**
 * Dynamic viscosity of mixtures of glycerol and water.
 *
 *   η = η_w^α η_g^(1−α),  α = 1 − C + abC(1 − C)/(aC + b(1 − C))
 *   a = 0.705 − 0.0017 t,  b = (4.9 + 0.036 t) a^2.5
 *
 * @param state temperatureC t in °C, 0 to 100; massFraction C of glycerol, 0 to 1.
 * @returns η in mPa·s; within 4 % of the measured table of Segur and Oberstar (1951).
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: N.-S. Cheng, Ind. Eng. Chem. Res. 47 (2008) 3285, equations (6), (11), (12), (21), (22).
 */
export function glycerolWaterViscosity({ temperatureC: t, massFraction: c }: State): number {
  requireRange("Viscosity of glycerol and water", "temperature / °C", t, 0, 100);
  requireRange("Viscosity of glycerol and water", "mass fraction", c, 0, 1);
  const water = 1.79 * Math.exp(((-1230 - t) * t) / (36100 + 360 * t));
  const glycerol = 12100 * Math.exp(((-1233 + t) * t) / (9900 + 70 * t));
  const a = 0.705 - 0.0017 * t;
  const b = (4.9 + 0.036 * t) * a ** 2.5;
  const alpha = 1 - c + (a * b * c * (1 - c)) / (a * c + b * (1 - c));
  return water ** alpha * glycerol ** (1 - alpha);
}

const tenths = [0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10];

/** g/cm³ at mass fractions 0, 0.1 … 1 of glycerol. */
const densityAt = {
  t20: [0.99823, 1.0221, 1.0469, 1.0727, 1.0993, 1.1263, 1.1538, 1.18125, 1.2085, 1.2351, 1.26108],
  t25: [0.99708, 1.0207, 1.04525, 1.0707, 1.0971, 1.12375, 1.15105, 1.1784, 1.20545, 1.232, 1.25802],
  t30: [0.99568, 1.01905, 1.0435, 1.06855, 1.09475, 1.1211, 1.1483, 1.17565, 1.2024, 1.2289, 1.25495],
};

/**
 * Density of mixtures of glycerol and water: parabola through the measured values at 20, 25 and 30 °C, cubic (four neighbours)
 * between the measured mass fractions 0, 0.1 … 1.
 *
 * @param state temperatureC in °C, 20 to 30; massFraction of glycerol, 0 to 1.
 * @returns ρ in kg/m³; 1.2 kg/m³ against the CRC Handbook's table.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: Bosart, Snoddy, Ind. Eng. Chem. 19 (1927) 506.
 */
export function glycerolWaterDensity({ temperatureC: t, massFraction: c }: State): number {
  requireRange("Density of glycerol and water", "temperature / °C", t, glycerolDensityRange.minC, glycerolDensityRange.maxC);
  requireRange("Density of glycerol and water", "mass fraction", c, 0, 1);
  const [at20, at25, at30] = [densityAt.t20, densityAt.t25, densityAt.t30].map((row) => interpolateCubic(tenths, row, 10 * c));
  const x = (t - 25) / 5;
  return 1000 * (at25 + (x * (at30 - at20)) / 2 + (x * x * (at20 - 2 * at25 + at30)) / 2);
}
