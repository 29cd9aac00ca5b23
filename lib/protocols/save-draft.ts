import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { inTransaction, row } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import { refuseDoubleName, tellOfProtocol } from "@/lib/protocols/create";
import { lockedProtocol, newestVersion } from "@/lib/protocols/locked";
import { Protocol } from "@/models/protocol";

type Draft = Readonly<Record<string, unknown>>;
export type SavedDraft = { id: string; name: string; draftSavedAt: string | null };

/** A protocol that has no version yet. While it has none, it is called what its draft says, numbered when that is taken. */
export async function beginDraft({ by, now, draft }: { by: Actor; now: Date; draft: Draft }): Promise<SavedDraft> {
  demand(by, "edit protocols");
  return inTransaction(async (transaction) => {
    const name = await freeName(draft, null, transaction);
    const protocol = await refuseDoubleName({ name, field: "draft.name" }, () => Protocol.create({ name, draft, draftSavedAt: now, createdBy: by.id, createdAt: now }, { transaction }));
    await audit(transaction, { by, now, action: "begin draft", entity: "protocol", entityId: protocol.id, detail: { name } });
    await tellOfProtocol(protocol.id, transaction);
    return saved(protocol);
  });
}

type Change = {
  by: Actor;
  now: Date;
  protocolId: string;
  name?: string;
  /** null throws the draft away. */
  draft?: Draft | null;
  draftBasedOn?: Date | null;
};

/**
 * Renames a protocol, saves or throws away the draft of its next version. That a draft was begun or thrown away is audited;
 * its every change is not, as the editor saves by itself while somebody types.
 */
export async function changeProtocol({ by, now, protocolId, name, draft, draftBasedOn }: Change): Promise<SavedDraft> {
  demand(by, "edit protocols");
  return inTransaction(async (transaction) => {
    const protocol = await lockedProtocol(protocolId, transaction);
    if (protocol.retiredAt) throw conflict(`${protocol.name} is retired; bring it back first`, "retired");
    if (draftBasedOn !== undefined && draftBasedOn?.getTime() !== protocol.draftSavedAt?.getTime())
      throw conflict("The draft was changed elsewhere since it was read; nothing was saved over it", "draft-changed", {
        draftSavedAt: protocol.draftSavedAt?.toISOString() ?? null,
      });
    const record = (action: string, detail: Record<string, unknown>) => audit(transaction, { by, now, action, entity: "protocol", entityId: protocolId, detail });

    const before = protocol.name;
    if (name !== undefined) protocol.name = name;
    if (draft !== undefined) {
      const isFirstOnly = (await newestVersion(protocolId, transaction)) === 0;
      if (draft === null && isFirstOnly) throw conflict("It has no version yet, so that its draft is all there is; delete the protocol instead", "only-draft");
      if (draft !== null && isFirstOnly && name === undefined) protocol.name = await freeName(draft, protocolId, transaction);
      if ((draft === null) !== (protocol.draft === null)) await record(draft === null ? "throw draft away" : "begin draft", { name: protocol.name });
      protocol.draft = draft;
      protocol.draftSavedAt = draft === null ? null : now;
    }
    if (name !== undefined && name !== before) await record("rename", { before, after: name });
    await refuseDoubleName({ name: protocol.name, field: name === undefined ? "draft.name" : "name" }, () => protocol.save({ transaction }));
    await tellOfProtocol(protocolId, transaction);
    return saved(protocol);
  });
}

/** Deletes a protocol that never had a version; its audit events stay. */
export async function deleteDraft({ by, now, protocolId }: { by: Actor; now: Date; protocolId: string }): Promise<void> {
  demand(by, "edit protocols");
  await inTransaction(async (transaction) => {
    const protocol = await lockedProtocol(protocolId, transaction);
    if ((await newestVersion(protocolId, transaction)) > 0) throw conflict(`${protocol.name} has versions, which are kept; retire it instead`, "has-versions");
    await protocol.destroy({ transaction });
    await audit(transaction, { by, now, action: "delete draft", entity: "protocol", entityId: protocolId, detail: { name: protocol.name } });
    await tellOfProtocol(protocolId, transaction);
  });
}

const saved = ({ id, name, draftSavedAt }: Protocol): SavedDraft => ({ id, name, draftSavedAt: draftSavedAt?.toISOString() ?? null });

/** The draft's name, or the same with the first number that no other protocol has. */
async function freeName(draft: Draft, ownId: string | null, transaction: Transaction): Promise<string> {
  const wanted = (typeof draft.name === "string" && draft.name.trim().slice(0, 190)) || "Untitled";
  const found = await row<{ name: string }>(
    `select case n when 1 then $1::text else $1::text || ' ' || n end as name from generate_series(1, 10000) n
      where not exists (select 1 from protocol p where lower(p.name) = lower(case n when 1 then $1::text else $1::text || ' ' || n end)
                          and p.retired_at is null and p.id is distinct from $2::bigint)
      order by n limit 1`,
    [wanted, ownId],
    transaction,
  );
  return found?.name ?? wanted;
}
