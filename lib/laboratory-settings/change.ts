import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { readLaboratory, type Laboratory } from "@/lib/laboratory";
import { demand, type Actor } from "@/lib/people/actor";
import { Setting } from "@/models/setting";

type Change = { by: Actor; now: Date; name?: string; timeZone?: string };

/** What is left out stays. The zone is that of the clock over every page; rigs keep their own. */
export async function changeLaboratory({ by, now, ...given }: Change): Promise<Laboratory> {
  demand(by, "settings");
  return inTransaction(async (transaction) => {
    await Setting.findOrCreate({ where: { name: "laboratory" }, defaults: { name: "laboratory", value: {} }, transaction });
    const setting = await Setting.findByPk("laboratory", { lock: true, transaction, rejectOnEmpty: true });
    const before = await readLaboratory(transaction);
    const after = { name: given.name ?? before.name, timeZone: given.timeZone ?? before.timeZone };
    await setting.update({ value: after }, { transaction });
    if (after.name !== before.name || after.timeZone !== before.timeZone) {
      await audit(transaction, { by, now, action: "change the laboratory", entity: "setting", entityId: "laboratory", detail: { before, after } });
    }
    return after;
  });
}
