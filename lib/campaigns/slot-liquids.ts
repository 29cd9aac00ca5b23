import { rows } from "@/lib/db";
import { typicalViscosityMPaS } from "@/lib/liquids/property-model";
import { tintOf } from "@/lib/liquids/tint";
import type { PropertyRow } from "@/models/json";

type SlotRow = { campaignId: string; slot: string; port: number; lotId: string; lot: string; liquidId: string; name: string; letter: string; model: string; massFraction: number | null; table: PropertyRow[] | null };

export type SlotLiquid = Omit<SlotRow, "model" | "massFraction" | "table"> & { tint: 1 | 2 | 3 };

/** What stands behind the slots of campaigns, with the letter and tint that the strips draw. */
export async function slotLiquids(campaignIds: readonly string[]): Promise<SlotLiquid[]> {
  const found = await rows<SlotRow>(
    `select cs.campaign_id as "campaignId", cs.slot, cs.port, lot.id as "lotId", lot.code as lot, l.id as "liquidId", l.name, l.letter, l.model,
            l.mass_fraction as "massFraction", l.property_table as "table"
       from campaign_slot cs join lot on lot.id = cs.lot_id join liquid l on l.id = lot.liquid_id where cs.campaign_id = any($1::bigint[]) order by cs.port`,
    [campaignIds],
  );
  return found.map(({ model, massFraction, table, ...slot }) => ({ ...slot, tint: tintOf(typicalViscosityMPaS({ name: slot.name, model, massFraction, table })) }));
}
