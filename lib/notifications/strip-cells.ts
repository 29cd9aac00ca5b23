import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";
import { typicalViscosityMPaS } from "@/lib/liquids/property-model";
import { tintOf } from "@/lib/liquids/tint";
import type { StripCell } from "@/lib/mail/frame";
import type { PropertyRow } from "@/models/json";

const MOST_CELLS = 10;

type Phase = { medium: string; name: string | null; letter: string | null; model: string | null; massFraction: number | null; table: PropertyRow[] | null };

/** The latest phases of a campaign as letter cells, runs of one medium as one. */
export async function readStripCells(transaction: Transaction, campaignId: string): Promise<StripCell[]> {
  const phases = await rows<Phase>(
    `select p.medium, q.name, q.letter, q.model, q.mass_fraction as "massFraction", q.property_table as "table"
       from phase p left join liquid q on q.id = p.liquid_id where p.campaign_id = $1 order by p.sequence desc limit $2`,
    [campaignId, 3 * MOST_CELLS],
    transaction,
  );
  const inOrder = phases.toReversed();
  return inOrder
    .filter(({ medium }, i) => medium !== inOrder[i - 1]?.medium)
    .slice(-MOST_CELLS)
    .map(({ medium, name, letter, model, massFraction, table }) => {
      if (medium === "air") return { letter: "A", kind: "air", tint: 1 };
      const viscosity = name && model ? typicalViscosityMPaS({ name, model, massFraction, table }) : null;
      return { letter: letter ?? medium.charAt(0).toUpperCase(), kind: "liquid", tint: tintOf(viscosity) };
    });
}
