import { Op, type Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { setGiven } from "@/lib/changes";
import { refuseDouble } from "@/lib/conflicts";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { getRig } from "@/lib/rigs/read";
import type { RigAnswer } from "@/lib/rigs/schema";
import { Port } from "@/models/port";
import { Rig } from "@/models/rig";

type RigChange = {
  by: Actor;
  now: Date;
  rigId: string;
  name?: string;
  timeZone?: string;
  ports?: number;
  wasteCapacityMl?: number | null;
  retired?: boolean;
};

/** Changes what may still change of a rig; an open campaign keeps its time zone and keeps it from being retired. */
export async function updateRig({ by, now, rigId, retired, ...wanted }: RigChange): Promise<RigAnswer> {
  demand(by, "edit rigs");
  return inTransaction(async (transaction) => {
    const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!rig) throw notFound("rig");
    const newZone = wanted.timeZone !== undefined && wanted.timeZone !== rig.timeZone;
    if (newZone || (retired && !rig.retiredAt)) await refuseWhileInUse(rigId, transaction);
    if (wanted.ports !== undefined) await changePorts(rigId, rig.ports, wanted.ports, transaction);

    const retiredAt = retired === undefined ? undefined : retired ? (rig.retiredAt ?? now) : null;
    const changes = setGiven(rig, { ...wanted, retiredAt });
    if (changes) {
      await refuseDouble({ constraint: "rig_name_key", field: "name", message: `There is already a rig called ${wanted.name}; choose another name` }, () => rig.save({ transaction }));
      await audit(transaction, { by, now, action: "update", entity: "rig", entityId: rigId, detail: changes });
      await notify("changed:rigs", transaction);
    }
    return getRig(rigId, transaction);
  });
}

async function refuseWhileInUse(rigId: string, transaction: Transaction): Promise<void> {
  const open = await row<{ name: string; state: string }>(
    "select name, state from campaign where rig_id = $1 and state in ('queued', 'running', 'held') order by started_at nulls last limit 1",
    [rigId],
    transaction,
  );
  if (open) throw conflict(`Campaign ${open.name} is ${open.state} on this rig; its time zone cannot change and it cannot be retired until that has ended`);
}

/** More ports are made empty; fewer only when the ones that go are empty and bound to no open campaign. */
async function changePorts(rigId: string, before: number, wanted: number, transaction: Transaction): Promise<void> {
  for (let number = before + 1; number <= wanted; number++) await Port.create({ rigId, number }, { transaction });
  if (wanted >= before) return;
  const used = await row<{ number: number }>(
    `select p.number from port p
      where p.rig_id = $1 and p.number > $2
        and (p.load_id is not null
             or exists (select 1 from campaign_slot s join campaign c on c.id = s.campaign_id
                         where c.rig_id = $1 and s.port = p.number and c.state in ('queued', 'running', 'held')))
      order by p.number desc limit 1`,
    [rigId, wanted],
    transaction,
  );
  if (used) throw conflict(`Port ${used.number} is in use; it cannot be taken away`);
  await Port.destroy({ where: { rigId, number: { [Op.gt]: wanted } }, transaction });
}
