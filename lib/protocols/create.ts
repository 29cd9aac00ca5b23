import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { refuseDouble } from "@/lib/conflicts";
import { inTransaction } from "@/lib/db";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import type { DefinitionInput } from "@/lib/protocol/schema";
import { checkedDefinition } from "@/lib/protocols/checked-definition";
import { Protocol } from "@/models/protocol";
import { ProtocolVersion } from "@/models/protocol-version";

export type CreatedProtocol = { id: string; versionId: string; version: number };

/** A protocol with its first version. */
export async function createProtocol({ by, now, definition: given }: { by: Actor; now: Date; definition: DefinitionInput }): Promise<CreatedProtocol> {
  demand(by, "edit protocols");
  const definition = checkedDefinition(given);
  return inTransaction(async (transaction) => {
    const { name } = definition;
    const { id } = await refuseDoubleName({ name, field: "definition.name" }, () => Protocol.create({ name, createdBy: by.id, createdAt: now }, { transaction }));
    const saved = await ProtocolVersion.create({ protocolId: id, version: 1, definition, createdBy: by.id, createdAt: now }, { transaction });
    await audit(transaction, { by, now, action: "create", entity: "protocol", entityId: id, detail: { name, versionId: saved.id } });
    await tellOfProtocol(id, transaction);
    return { id, versionId: saved.id, version: 1 };
  });
}

export const refuseDoubleName = <T>({ name, field }: { name: string; field?: string }, write: () => Promise<T>): Promise<T> =>
  refuseDouble({ constraint: "protocol_name", field, message: `There is already a protocol called ${name}` }, write);

export const tellOfProtocol = (protocolId: string, transaction: Transaction): Promise<void> => notify(`changed:protocol:${protocolId}`, transaction);
