import {
  ethanolWaterViscosityAt20,
  propanolWaterDensityAt20,
  propanolWaterViscosityAt20,
  type Row,
} from "./aqueous-tables";
import { requireRange } from "./fluid-range-error";
import { interpolate, interpolateCubic } from "./interpolate";

type State = { temperatureC: number; massFraction: number };

/** The tables are for 20 °C. Within half a kelvin the value stands, its change with temperature being inside the stated uncertainty. */
export const aqueousRange = { minC: 19.5, maxC: 20.5 };

/**
 * Viscosity of ethanol and water near 20 °C, interpolated in ln η.
 *
 * @param state temperatureC 19.5 to 20.5 °C; massFraction of ethanol, 0 to 1.
 * @returns η in mPa·s; 4 % (2 % of the table, the rest for half a kelvin).
 * @throws FluidRangeError outside the range or for NaN.
 */
export function ethanolWaterViscosity(state: State): number {
  return lookUp("Viscosity of ethanol and water", ethanolWaterViscosityAt20, state, inLogarithms);
}

/**
 * Density of 2-propanol and water near 20 °C, cubic between the rows, which lie 20 % apart above 20 %.
 *
 * @param state temperatureC 19.5 to 20.5 °C; massFraction of 2-propanol, 0 to 1.
 * @returns ρ in kg/m³; 2 kg/m³.
 * @throws FluidRangeError outside the range or for NaN.
 */
export function propanolWaterDensity(state: State): number {
  return lookUp("Density of 2-propanol and water", propanolWaterDensityAt20, state, interpolateCubic);
}

/**
 * Viscosity of 2-propanol and water near 20 °C, interpolated in ln η.
 *
 * @param state temperatureC 19.5 to 20.5 °C; massFraction of 2-propanol, 0 to 0.2: the table goes no further.
 * @returns η in mPa·s; 4 %.
 * @throws FluidRangeError outside the range or for NaN.
 */
export function propanolWaterViscosity(state: State): number {
  return lookUp("Viscosity of 2-propanol and water", propanolWaterViscosityAt20, state, inLogarithms);
}

function lookUp(property: string, table: readonly Row[], state: State, between: typeof interpolate): number {
  requireRange(property, "temperature / °C", state.temperatureC, aqueousRange.minC, aqueousRange.maxC);
  requireRange(property, "mass fraction", state.massFraction, 0, table[table.length - 1][0] / 100);
  return between(
    table.map(([massPercent]) => massPercent),
    table.map(([, value]) => value),
    state.massFraction * 100,
  );
}

const inLogarithms: typeof interpolate = (xs, ys, x) => Math.exp(interpolate(xs, ys.map(Math.log), x));
