import { liquidProperties, liquidRange, type LiquidModel, type LiquidProperties, type LiquidRange } from "@/lib/fluids/liquid-properties";
import { FluidRangeError } from "@/lib/fluids/fluid-range-error";
import type { PropertyRow } from "@/models/json";

export type StoredModel = { name: string; model: string; massFraction: number | null; table: readonly PropertyRow[] | null };

/** The stored columns as the model that computes; they were checked when the liquid was made. */
export function propertyModel({ name, model, massFraction, table }: StoredModel): LiquidModel {
  switch (model) {
    case "water":
    case "ethanol":
    case "2-propanol":
      return { model };
    case "ethanol-water":
    case "2-propanol-water":
    case "glycerol-water":
      if (massFraction !== null) return { model, massFraction };
      break;
    case "table":
      if (table) return { model, table };
  }
  throw new Error(`The property model of ${name} is not complete: ${model}`);
}

/** Properties at a temperature, null outside the model's range. */
export function propertiesAt(liquid: StoredModel, temperatureC: number): LiquidProperties | null {
  try {
    return liquidProperties(propertyModel(liquid), temperatureC);
  } catch (error) {
    if (error instanceof FluidRangeError) return null;
    throw error;
  }
}

export const rangeOf = (liquid: StoredModel): LiquidRange => liquidRange(propertyModel(liquid));

/** Viscosity by which a liquid gets its tint: at 20 °C, or at the end of its range that is nearest. */
export function typicalViscosityMPaS(liquid: StoredModel): number | null {
  const { minC, maxC } = rangeOf(liquid);
  return propertiesAt(liquid, Math.min(Math.max(20, minC), maxC))?.viscosityMPaS ?? null;
}
