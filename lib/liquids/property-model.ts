import { liquidProperties, liquidRange, type LiquidModel, type LiquidProperties, type LiquidRange } from "@/lib/fluids/liquid-properties";
import { FluidRangeError } from "@/lib/fluids/fluid-range-error";
import type { PropertyRow } from "@/models/json";

type Stored = { name: string; model: string; massFraction: number | null; table: readonly PropertyRow[] | null };

/** The stored columns as the model that computes; they were checked when the liquid was made. */
export function propertyModel({ name, model, massFraction, table }: Stored): LiquidModel {
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
export function propertiesAt(liquid: Stored, temperatureC: number): LiquidProperties | null {
  try {
    return liquidProperties(propertyModel(liquid), temperatureC);
  } catch (error) {
    if (error instanceof FluidRangeError) return null;
    throw error;
  }
}

export const rangeOf = (liquid: Stored): LiquidRange => liquidRange(propertyModel(liquid));
