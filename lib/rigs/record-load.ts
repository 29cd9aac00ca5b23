import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, inTransaction, row } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { occupyingCampaign } from "@/lib/rigs/occupying-campaign";
import { fulfilTasks } from "@/lib/tasks/fulfil-tasks";
import { Load } from "@/models/load";
import { Rig } from "@/models/rig";

type NewLoad = {
  by: Actor;
  now: Date;
  rigId: string;
  port: number;
  lotId: string;
  volumeMl: number;
  how: "replace" | "topUp";
  /** Yes, another lot of the same liquid in mid-campaign. */
  confirm?: boolean;
};

type LotOnPort = { lotId: string; code: string; liquidId: string; liquidName: string };

/**
 * Records a bottle put on a port or topped up. A top up takes the same lot only. While a campaign draws from the port,
 * another liquid is refused, and another lot of the same liquid needs a confirmation and stands in the campaign's log.
 */
export async function recordLoad({ by, now, rigId, port, lotId, volumeMl, how, confirm = false }: NewLoad): Promise<{ id: string }> {
  demand(by, "record loads");
  return inTransaction(async (transaction) => {
    const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.NO_KEY_UPDATE });
    if (!rig) throw notFound("rig");
    if (rig.retiredAt) throw conflict(`${rig.name} is retired`);
    const standing = await bottleOn(rigId, port, transaction);
    if (!standing) throw impossible(`${rig.name} has no port ${port}; it has ${rig.ports}`, { errors: [{ path: "port", message: "there is no such port" }] });
    const lot = await lotWithLiquid(lotId, transaction);

    if (how === "topUp") refuseMixing(standing, lot, port);
    const otherLot = await checkCampaign({ rigId, port, lot, standing, confirm }, transaction);

    const load = await Load.create({ rigId, port, lotId, volumeMl, how, loadedBy: by.id, loadedAt: now }, { transaction });
    await change(
      `update port set load_id = $3, remaining_ml = case when $4 = 'topUp' then remaining_ml else 0 end + $5 where rig_id = $1 and number = $2`,
      [rigId, port, load.id, how, volumeMl],
      transaction,
    );
    const text = `Port ${port}: ${how === "topUp" ? "topped up" : "bottle loaded"}, ${volumeMl} mL of ${lot.liquidName}, lot ${lot.code}`;
    if (otherLot) {
      const { campaignId, before } = otherLot;
      await recordEvent(transaction, { campaignId, now, kind: "otherLot", who: by.name, text: `${text}, in place of lot ${before}` });
    }
    await audit(transaction, { by, now, action: "load", entity: "rig", entityId: rigId, detail: { port, lotId, volumeMl, how, confirm } });
    await fulfilTasks(transaction, { rigId, kind: "load", port, note: text, by, now });
    await notify(`rig:${rigId}`, transaction);
    await notify("changed:rigs", transaction);
    return { id: load.id };
  });
}

async function lotWithLiquid(lotId: string, transaction: Transaction): Promise<LotOnPort> {
  const lot = await row<LotOnPort>(
    `select lot.id as "lotId", lot.code, q.id as "liquidId", q.name as "liquidName"
       from lot join liquid q on q.id = lot.liquid_id where lot.id = $1`,
    [lotId],
    transaction,
  );
  if (!lot) throw impossible("There is no such lot", { errors: [{ path: "lotId", message: "there is no such lot" }] });
  return lot;
}

/** What stands on the port, the port locked; undefined when the rig has no such port. */
function bottleOn(rigId: string, port: number, transaction: Transaction): Promise<Partial<LotOnPort> | undefined> {
  return row<Partial<LotOnPort>>(
    `select lot.id as "lotId", lot.code, lot.liquid_id as "liquidId"
       from port p left join load l on l.id = p.load_id left join lot on lot.id = l.lot_id
      where p.rig_id = $1 and p.number = $2 for no key update of p`,
    [rigId, port],
    transaction,
  );
}

function refuseMixing(standing: Partial<LotOnPort>, lot: LotOnPort, port: number): void {
  if (!standing.lotId) throw impossible(`There is no bottle on port ${port} to top up; record it as a new bottle`, { errors: [{ path: "how", message: "no bottle there" }] });
  if (standing.lotId !== lot.lotId)
    throw impossible(`Lot ${standing.code} stands on port ${port}; it can only be topped up with the same lot, not with ${lot.code}. Put on a new bottle instead`, {
      errors: [{ path: "lotId", message: "is another lot than the one on the port" }],
    });
}

type Check = { rigId: string; port: number; lot: LotOnPort; standing: Partial<LotOnPort>; confirm: boolean };

/** @returns The campaign whose lot changes under way, with the lot before; undefined when none does. */
async function checkCampaign({ rigId, port, lot, standing, confirm }: Check, transaction: Transaction): Promise<{ campaignId: string; before: string } | undefined> {
  const campaign = await occupyingCampaign(rigId, transaction);
  if (!campaign || (campaign.state !== "running" && campaign.state !== "held")) return undefined;
  const slot = await row<{ slot: string } & LotOnPort>(
    `select cs.slot, lot.id as "lotId", lot.code, q.id as "liquidId", q.name as "liquidName"
       from campaign_slot cs join lot on lot.id = cs.lot_id join liquid q on q.id = lot.liquid_id
      where cs.campaign_id = $1 and cs.port = $2`,
    [campaign.id, port],
    transaction,
  );
  if (!slot) return undefined;
  if (slot.liquidId !== lot.liquidId)
    throw impossible(`${campaign.name} draws ${slot.liquidName} from port ${port} for ${slot.slot}; ${lot.liquidName} cannot stand there until it has ended`, undefined, "other-liquid");

  const before = standing.liquidId === slot.liquidId && standing.lotId && standing.code ? { lotId: standing.lotId, code: standing.code } : slot;
  if (before.lotId === lot.lotId) return undefined;
  if (!confirm)
    throw conflict(`${campaign.name} has drawn lot ${before.code} from port ${port} so far; say that lot ${lot.code} is meant, and it goes into the campaign's log`, "other-lot");
  return { campaignId: campaign.id, before: before.code };
}
