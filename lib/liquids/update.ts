import { audit } from "@/lib/audit/record";
import { setGiven } from "@/lib/changes";
import { constraintOf } from "@/lib/conflicts";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import type { Hazards } from "@/lib/liquids/create";
import { getLiquid } from "@/lib/liquids/read";
import type { LiquidAnswer } from "@/lib/liquids/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { Liquid } from "@/models/liquid";

type LiquidChange = { by: Actor; now: Date; liquidId: string; name?: string; letter?: string; hazards?: Hazards; retired?: boolean };

/** Changes name, letter or hazards (which are replaced whole). A liquid that stands on a port or that an open campaign needs is not retired. */
export async function updateLiquid({ by, now, liquidId, name, letter, hazards, retired }: LiquidChange): Promise<LiquidAnswer> {
  demand(by, "edit liquids");
  return inTransaction(async (transaction) => {
    const liquid = await Liquid.findByPk(liquidId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!liquid) throw notFound("liquid");
    if (retired && !liquid.retiredAt) {
      const used = await row(
        `select 1 from campaign_slot s join campaign c on c.id = s.campaign_id join lot on lot.id = s.lot_id
          where lot.liquid_id = $1 and c.state in ('queued', 'running', 'held')
         union all
         select 1 from port p join load l on l.id = p.load_id join lot on lot.id = l.lot_id where lot.liquid_id = $1 limit 1`,
        [liquidId],
        transaction,
      );
      if (used) throw conflict(`${liquid.name} stands on a port, or a campaign needs it; it cannot be retired yet`);
    }
    const changes = setGiven(liquid, {
      name,
      letter,
      ...(hazards && {
        ghs: hazards.ghs ?? [],
        flashPointC: hazards.flashPointC ?? null,
        waste: hazards.waste ?? null,
        notWith: hazards.notWith ?? [],
      }),
      retiredAt: retired === undefined ? undefined : retired ? (liquid.retiredAt ?? now) : null,
    });
    if (changes) {
      await save(liquid, () => liquid.save({ transaction }));
      await audit(transaction, { by, now, action: "update", entity: "liquid", entityId: liquidId, detail: changes });
      await notify("changed:liquids", transaction);
    }
    return getLiquid(liquidId, transaction);
  });
}

async function save(liquid: Liquid, write: () => Promise<unknown>): Promise<void> {
  try {
    await write();
  } catch (error) {
    const constraint = constraintOf(error);
    if (constraint === "liquid_name_key") throw conflict(`There is already a liquid called ${liquid.name}`, "already-there", { errors: [{ path: "name", message: "is taken by another liquid" }] });
    if (constraint === "liquid_letter_key") throw conflict(`The letter ${liquid.letter} is taken by another liquid`, "letter-taken", { errors: [{ path: "letter", message: "is taken by another liquid" }] });
    throw error;
  }
}
