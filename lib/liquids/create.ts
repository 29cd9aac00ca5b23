import { audit } from "@/lib/audit/record";
import { refuseDouble } from "@/lib/conflicts";
import { change, inTransaction, rows } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { chooseLetter } from "@/lib/liquids/letter";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { Liquid } from "@/models/liquid";
import type { PropertyRow } from "@/models/json";

export type Hazards = { ghs?: string[]; flashPointC?: number; waste?: string; notWith?: string[] };

type NewLiquid = {
  by: Actor;
  now: Date;
  name: string;
  /** Chosen from the name when absent. */
  letter?: string;
  model: string;
  massFraction?: number;
  table?: PropertyRow[];
  hazards?: Hazards;
};

export async function createLiquid({ by, now, name, letter, model, massFraction, table, hazards = {} }: NewLiquid): Promise<{ id: string; letter: string }> {
  demand(by, "edit liquids");
  return inTransaction(async (transaction) => {
    // Two liquids made at once would choose the same letter.
    await change("lock table liquid in share row exclusive mode", [], transaction);
    const taken = await rows<{ name: string; letter: string }>("select name, letter from liquid", [], transaction);
    const owner = taken.find((liquid) => liquid.letter === letter);
    if (owner) throw conflict(`The letter ${letter} is taken by ${owner.name}`, "letter-taken", { errors: [{ path: "letter", message: `is taken by ${owner.name}` }] });
    const chosen = letter ?? chooseLetter(name, new Set(taken.map((liquid) => liquid.letter)));
    if (!chosen) throw conflict("All letters are taken; retire a liquid and give its letter away first", "letter-taken");

    const { id } = await refuseDouble({ constraint: "liquid_name_key", field: "name", message: `There is already a liquid called ${name}` }, () =>
      Liquid.create(
        {
          name,
          letter: chosen,
          model,
          massFraction: massFraction ?? null,
          propertyTable: table ?? null,
          ghs: hazards.ghs ?? [],
          flashPointC: hazards.flashPointC ?? null,
          waste: hazards.waste ?? null,
          notWith: hazards.notWith ?? [],
          createdAt: now,
        },
        { transaction },
      ),
    );
    await audit(transaction, { by, now, action: "create", entity: "liquid", entityId: id, detail: { name, letter: chosen, model, massFraction, table, hazards } });
    await notify("changed:liquids", transaction);
    return { id, letter: chosen };
  });
}
