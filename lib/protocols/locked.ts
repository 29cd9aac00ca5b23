import type { Transaction } from "sequelize";
import { notFound } from "@/lib/errors";
import { Protocol } from "@/models/protocol";
import { ProtocolVersion } from "@/models/protocol-version";

/** The protocol, its row locked until the transaction ends. @throws AppError 404 when there is none. */
export async function lockedProtocol(protocolId: string, transaction: Transaction): Promise<Protocol> {
  const protocol = await Protocol.findByPk(protocolId, { transaction, lock: transaction.LOCK.UPDATE });
  if (!protocol) throw notFound("protocol");
  return protocol;
}

/** Number of the newest version, 0 while there is none. Call it with the protocol locked. */
export async function newestVersion(protocolId: string, transaction: Transaction): Promise<number> {
  return (await ProtocolVersion.max<number, ProtocolVersion>("version", { where: { protocolId }, transaction })) ?? 0;
}
