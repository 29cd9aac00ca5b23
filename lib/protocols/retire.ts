import { audit } from "@/lib/audit/record";
import { inTransaction, row } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import { refuseDoubleName, tellOfProtocol } from "@/lib/protocols/create";
import { lockedProtocol } from "@/lib/protocols/locked";

type Retirement = { by: Actor; now: Date; protocolId: string };

/** Takes a protocol out of the lists to choose from; versions and what ran stay. Not while a campaign is in line or on a rig with it. */
export async function retireProtocol({ by, now, protocolId }: Retirement): Promise<void> {
  demand(by, "edit protocols");
  await inTransaction(async (transaction) => {
    const protocol = await lockedProtocol(protocolId, transaction);
    if (protocol.retiredAt) return;
    const open = await row<{ name: string }>(
      `select c.name from campaign c join protocol_version v on v.id = c.protocol_version_id
        where v.protocol_id = $1 and c.state in ('queued', 'running', 'held') order by c.id limit 1`,
      [protocolId],
      transaction,
    );
    if (open) throw conflict(`${open.name} still needs ${protocol.name}; it cannot be retired yet`, "needed");
    await protocol.update({ retiredAt: now }, { transaction });
    await audit(transaction, { by, now, action: "retire", entity: "protocol", entityId: protocolId, detail: { name: protocol.name } });
    await tellOfProtocol(protocolId, transaction);
  });
}

/** Brings a retired protocol back, unless another has taken its name since. */
export async function bringBackProtocol({ by, now, protocolId }: Retirement): Promise<void> {
  demand(by, "edit protocols");
  await inTransaction(async (transaction) => {
    const protocol = await lockedProtocol(protocolId, transaction);
    if (!protocol.retiredAt) return;
    await refuseDoubleName({ name: protocol.name }, () => protocol.update({ retiredAt: null }, { transaction }));
    await audit(transaction, { by, now, action: "bring back", entity: "protocol", entityId: protocolId, detail: { name: protocol.name } });
    await tellOfProtocol(protocolId, transaction);
  });
}
