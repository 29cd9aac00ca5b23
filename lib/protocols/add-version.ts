import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import type { DefinitionInput } from "@/lib/protocol/schema";
import { checkedDefinition } from "@/lib/protocols/checked-definition";
import { type CreatedProtocol, refuseDoubleName, tellOfProtocol } from "@/lib/protocols/create";
import { lockedProtocol, newestVersion } from "@/lib/protocols/locked";
import { ProtocolVersion } from "@/models/protocol-version";

type NewVersion = {
  by: Actor;
  now: Date;
  protocolId: string;
  definition: DefinitionInput;
  note?: string;
  /** The version it was written from; absent: whatever is the newest. */
  basedOn?: number;
};

/** Freezes the next version; the draft is done with, and the protocol takes the version's name. Earlier versions stay as they are. */
export async function addVersion({ by, now, protocolId, definition: given, note, basedOn }: NewVersion): Promise<CreatedProtocol> {
  demand(by, "edit protocols");
  const definition = checkedDefinition(given);
  return inTransaction(async (transaction) => {
    const protocol = await lockedProtocol(protocolId, transaction);
    if (protocol.retiredAt) throw conflict(`${protocol.name} is retired; bring it back first`, "retired");
    const newest = await newestVersion(protocolId, transaction);
    if (basedOn !== undefined && basedOn !== newest)
      throw conflict(`Version ${newest} was saved in the meantime; what you wrote from version ${basedOn} is kept and was not saved`, "newer-version", { newest });

    const version = newest + 1;
    const saved = await ProtocolVersion.create({ protocolId, version, definition, note: note ?? null, createdBy: by.id, createdAt: now }, { transaction });
    protocol.name = definition.name;
    protocol.draft = null;
    protocol.draftSavedAt = null;
    await refuseDoubleName({ name: definition.name, field: "definition.name" }, () => protocol.save({ transaction }));
    await audit(transaction, { by, now, action: "add version", entity: "protocol", entityId: protocolId, detail: { name: definition.name, version, versionId: saved.id, note } });
    await tellOfProtocol(protocolId, transaction);
    return { id: protocolId, versionId: saved.id, version };
  });
}
