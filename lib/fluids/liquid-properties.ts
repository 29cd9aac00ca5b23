import { alcoholViscosity } from "./alcohol-viscosity";
import { aqueousRange, ethanolWaterViscosity, propanolWaterDensity, propanolWaterViscosity } from "./aqueous-at-20";
import { ethanolWaterDensity, ethanolWaterDensityRange } from "./ethanol-water-density";
import { requireRange } from "./fluid-range-error";
import { glycerolDensityRange, glycerolWaterDensity, glycerolWaterViscosity } from "./glycerol-water";
import { interpolate } from "./interpolate";
import { propanolDensity, propanolDensityRange } from "./propanol-density";
import { waterDensity, waterDensityRange } from "./water-density";
import { waterViscosity } from "./water-viscosity";

/** How a liquid's density and viscosity follow temperature; as in `POST /api/liquids`. */
export type LiquidModel =
  | { model: "water" | "ethanol" | "2-propanol" }
  | { model: "ethanol-water" | "2-propanol-water" | "glycerol-water"; massFraction: number }
  | { model: "table"; table: readonly TablePoint[] };

export type TablePoint = { temperatureC: number; densityKgM3: number; viscosityMPaS: number };

export type LiquidProperties = { densityKgM3: number; viscosityMPaS: number };

/**
 * Density and viscosity of a liquid at atmospheric pressure.
 *
 * A table is interpolated between its neighbouring temperatures, density on a straight line, viscosity in ln η; a table of one point
 * holds at that temperature only.
 *
 * @param model The liquid. `massFraction` is that of the first-named substance, 0 to 1.
 * @param temperatureC Temperature in °C.
 * @returns Density in kg/m³, viscosity in mPa·s. Uncertainties: `liquidRange`.
 * @throws FluidRangeError outside the range of the model, or for NaN: never an extrapolated number.
 * @throws RangeError if a table is empty, has a temperature twice, or a value not finite or not above zero.
 */
export function liquidProperties(model: LiquidModel, temperatureC: number): LiquidProperties {
  switch (model.model) {
    case "water":
      return { densityKgM3: waterDensity(temperatureC), viscosityMPaS: waterViscosity(temperatureC) };
    case "ethanol":
      return {
        densityKgM3: ethanolWaterDensity({ temperatureC, massFraction: 1 }),
        viscosityMPaS: alcoholViscosity("ethanol", temperatureC),
      };
    case "2-propanol":
      return { densityKgM3: propanolDensity(temperatureC), viscosityMPaS: alcoholViscosity("2-propanol", temperatureC) };
    case "ethanol-water": {
      const state = { temperatureC, massFraction: model.massFraction };
      return { densityKgM3: ethanolWaterDensity(state), viscosityMPaS: ethanolWaterViscosity(state) };
    }
    case "2-propanol-water": {
      const state = { temperatureC, massFraction: model.massFraction };
      return { densityKgM3: propanolWaterDensity(state), viscosityMPaS: propanolWaterViscosity(state) };
    }
    case "glycerol-water": {
      const state = { temperatureC, massFraction: model.massFraction };
      return { densityKgM3: glycerolWaterDensity(state), viscosityMPaS: glycerolWaterViscosity(state) };
    }
    case "table":
      return fromTable(model.table, temperatureC);
  }
}

/** What a model covers and how well: temperatures in °C and standard uncertainties (absent for a table: its lot's certificate says). */
export type LiquidRange = { minC: number; maxC: number; uDensityKgM3?: number; uViscosityPercent?: number };

export function liquidRange(model: LiquidModel): LiquidRange {
  switch (model.model) {
    case "water":
      return { ...waterDensityRange, uDensityKgM3: 0.01, uViscosityPercent: 0.5 };
    case "ethanol":
      return { ...ethanolWaterDensityRange, uDensityKgM3: 0.05, uViscosityPercent: 2 };
    case "2-propanol":
      return { ...propanolDensityRange, uDensityKgM3: 1.5, uViscosityPercent: 3 };
    case "ethanol-water":
      return { ...aqueousRange, uDensityKgM3: 0.05, uViscosityPercent: 4 };
    case "2-propanol-water":
      return { ...aqueousRange, uDensityKgM3: 2, uViscosityPercent: 4 };
    case "glycerol-water":
      return { ...glycerolDensityRange, uDensityKgM3: 1.2, uViscosityPercent: 4 };
    case "table": {
      const temperatures = checkedTable(model.table).map((point) => point.temperatureC);
      return { minC: temperatures[0], maxC: temperatures[temperatures.length - 1] };
    }
  }
}

function fromTable(table: readonly TablePoint[], temperatureC: number): LiquidProperties {
  const points = checkedTable(table);
  const temperatures = points.map((point) => point.temperatureC);
  requireRange("This liquid's table", "temperature / °C", temperatureC, temperatures[0], temperatures[temperatures.length - 1]);
  return {
    densityKgM3: interpolate(temperatures, points.map((point) => point.densityKgM3), temperatureC),
    viscosityMPaS: Math.exp(interpolate(temperatures, points.map((point) => Math.log(point.viscosityMPaS)), temperatureC)),
  };
}

function checkedTable(table: readonly TablePoint[]): readonly TablePoint[] {
  if (table.length === 0) throw new RangeError("A table needs at least one temperature");
  const points = [...table].sort((a, b) => a.temperatureC - b.temperatureC);
  points.forEach((point, i) => {
    if (!Number.isFinite(point.temperatureC)) throw new RangeError("A table's temperatures must be finite numbers");
    if (!(point.densityKgM3 > 0 && point.viscosityMPaS > 0 && Number.isFinite(point.densityKgM3 + point.viscosityMPaS)))
      throw new RangeError(`Density and viscosity at ${point.temperatureC} °C must be above zero`);
    if (i > 0 && point.temperatureC === points[i - 1].temperatureC)
      throw new RangeError(`The table has ${point.temperatureC} °C twice`);
  });
  return points;
}
