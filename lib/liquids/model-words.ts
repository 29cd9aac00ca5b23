import { formatNumber } from "@/lib/format";
import type { LiquidAnswer } from "@/lib/liquids/schema";

/** The property model of a liquid in words: `ethanol-water, 40 % by mass`, `table, 5 temperatures`. */
export function modelWords({ model, massFraction, table }: Pick<LiquidAnswer, "model" | "massFraction" | "table">): string {
  if (massFraction !== null) return `${model}, ${formatNumber(massFraction * 100)} % by mass`;
  return table ? `table, ${table.length} temperatures` : model;
}
