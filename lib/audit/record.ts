import type { Transaction } from "sequelize";
import { nameOf, type By } from "@/lib/people/actor";
import { AuditEvent } from "@/models/audit-event";

type Entry = {
  by: By | { rigId: string; name: string };
  now: Date;
  /** A verb of the trade: "hold", "resume", "acknowledge". */
  action: string;
  entity: string;
  entityId: string;
  detail?: Record<string, unknown>;
};

/** Writes who did what inside the caller's transaction, so that a change without its audit event cannot exist. */
export async function audit(transaction: Transaction, { by, now, action, entity, entityId, detail = {} }: Entry): Promise<void> {
  const rig = typeof by === "object" && "rigId" in by ? by : undefined;
  const person = typeof by === "object" && !("rigId" in by) ? by : undefined;
  await AuditEvent.create(
    {
      at: now,
      personId: person?.id ?? null,
      rigId: rig?.rigId ?? null,
      who: rig ? `rig agent of ${rig.name}` : nameOf(by as By),
      action,
      entity,
      entityId,
      detail,
    },
    { transaction },
  );
}
