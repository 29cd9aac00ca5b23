import { audit } from "@/lib/audit/record";
import { setGiven } from "@/lib/changes";
import { refuseDouble } from "@/lib/conflicts";
import { inTransaction } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { getLot } from "@/lib/liquids/lots";
import type { LotAnswer } from "@/lib/liquids/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import type { CertificateRow } from "@/models/json";
import { Liquid } from "@/models/liquid";
import { Lot } from "@/models/lot";

type NewLot = { by: Actor; now: Date; liquidId: string; code: string; receivedAt?: Date; expiresAt?: Date; certificate?: CertificateRow[] };

/** Records one delivered bottle of a liquid. */
export async function recordLot({ by, now, liquidId, code, receivedAt, expiresAt, certificate = [] }: NewLot): Promise<{ id: string }> {
  demand(by, "edit liquids");
  return inTransaction(async (transaction) => {
    const liquid = await Liquid.findByPk(liquidId, { transaction, lock: transaction.LOCK.SHARE });
    if (!liquid) throw notFound("liquid");
    if (liquid.retiredAt) throw conflict(`${liquid.name} is retired; it gets no new lots`);
    const { id } = await refuseDouble({ constraint: "lot_liquid_id_code_key", field: "code", message: `There is already a lot ${code} of ${liquid.name}` }, () =>
      Lot.create({ liquidId, code, receivedAt: receivedAt ?? null, expiresAt: expiresAt ?? null, certificate, createdAt: now }, { transaction }),
    );
    await audit(transaction, { by, now, action: "create", entity: "lot", entityId: id, detail: { liquidId, code, receivedAt, expiresAt, certificate } });
    await notify("changed:liquids", transaction);
    return { id };
  });
}

type LotChange = { by: Actor; now: Date; lotId: string; receivedAt?: Date | null; expiresAt?: Date | null; certificate?: CertificateRow[] };

/** Corrects dates or the certificate of a lot; what stood before is in the audit log. */
export async function updateLot({ by, now, lotId, ...wanted }: LotChange): Promise<LotAnswer> {
  demand(by, "edit liquids");
  return inTransaction(async (transaction) => {
    const lot = await Lot.findByPk(lotId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!lot) throw notFound("lot");
    const changes = setGiven(lot, wanted);
    if (lot.receivedAt && lot.expiresAt && lot.receivedAt >= lot.expiresAt)
      throw impossible("A lot expires after it was received", { errors: [{ path: "expiresAt", message: "must lie after the day it was received" }] });
    if (changes) {
      await lot.save({ transaction });
      await audit(transaction, { by, now, action: "update", entity: "lot", entityId: lotId, detail: changes });
      await notify("changed:liquids", transaction);
    }
    return getLot(lotId, transaction);
  });
}
