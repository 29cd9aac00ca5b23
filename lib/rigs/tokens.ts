import { z } from "zod";
import { audit } from "@/lib/audit/record";
import { inTransaction, row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { conflict, notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import { demand, type Actor } from "@/lib/people/actor";
import type { TokenAnswer } from "@/lib/rigs/schema";
import { newToken } from "@/lib/tokens";
import { AgentToken } from "@/models/agent-token";
import { Rig } from "@/models/rig";

type NewAgentToken = { by: Actor; now: Date; rigId: string; name: string };

/** Makes a token for a rig's agent. The answer is the only place where the token ever stands; its hash is kept. */
export async function createAgentToken({ by, now, rigId, name }: NewAgentToken): Promise<{ id: string; token: string }> {
  demand(by, "agent tokens");
  return inTransaction(async (transaction) => {
    const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.SHARE });
    if (!rig) throw notFound("rig");
    if (rig.retiredAt) throw conflict(`${rig.name} is retired; its agent gets no token`);
    const { token, hash, last4 } = newToken("agent");
    const { id } = await AgentToken.create({ rigId, name, tokenHash: hash, last4, createdBy: by.id, createdAt: now }, { transaction });
    await audit(transaction, { by, now, action: "create token", entity: "agentToken", entityId: id, detail: { rigId, name, last4 } });
    return { id, token };
  });
}

type Revocation = { by: Actor; now: Date; rigId: string; tokenId: string };

/** Withdraws a token: the agent that uses it is refused from its next call on, and its session ends. Again changes nothing. */
export async function revokeAgentToken({ by, now, rigId, tokenId }: Revocation): Promise<{ id: string }> {
  demand(by, "agent tokens");
  return inTransaction(async (transaction) => {
    const token = await AgentToken.findOne({ where: { id: tokenId, rigId }, transaction, lock: transaction.LOCK.UPDATE });
    if (!token) throw notFound("token");
    if (token.revokedAt) return { id: tokenId };
    await token.update({ revokedAt: now }, { transaction });
    await row("update agent_session set ended_at = $2 where agent_token_id = $1 and ended_at is null returning id", [tokenId, now], transaction);
    await audit(transaction, { by, now, action: "withdraw token", entity: "agentToken", entityId: tokenId, detail: { rigId, name: token.name } });
    return { id: tokenId };
  });
}

type TokenQuery = { by: Actor; rigId: string; limit: number; cursor?: string };
type TokenRow = Omit<TokenAnswer, "createdAt" | "lastUsedAt" | "revokedAt"> & { createdAt: Date; lastUsedAt: Date | null; revokedAt: Date | null };

const SELECT = `
  select t.id, t.name, t.last4, p.name as "createdBy", t.created_at as "createdAt", t.last_used_at as "lastUsedAt", t.revoked_at as "revokedAt"
    from agent_token t left join person p on p.id = t.created_by`;

/** Tokens of a rig, the withdrawn ones too, newest first; of each only the last four signs. @throws AppError 404 when there is no such rig. */
export async function findAgentTokens({ by, rigId, limit, cursor }: TokenQuery): Promise<Page<TokenAnswer>> {
  demand(by, "agent tokens");
  const [id] = readCursor(cursor, z.tuple([idSchema])) ?? [null];
  const found = await rows<TokenRow>(`${SELECT} where t.rig_id = $1 and ($2::bigint is null or t.id < $2) order by t.id desc limit $3`, [rigId, id, limit + 1]);
  if (found.length === 0) await demandExists("rig", rigId);
  const { items, nextCursor } = cutPage(found, limit, (token) => [token.id]);
  return { items: items.map(present), nextCursor };
}

/** @throws AppError 404 when the rig has no such token. */
export async function getAgentToken({ by, rigId, tokenId }: { by: Actor; rigId: string; tokenId: string }): Promise<TokenAnswer> {
  demand(by, "agent tokens");
  const found = await row<TokenRow>(`${SELECT} where t.rig_id = $1 and t.id = $2`, [rigId, tokenId]);
  if (!found) throw notFound("token");
  return present(found);
}

const present = (token: TokenRow): TokenAnswer => ({
  ...token,
  createdAt: token.createdAt.toISOString(),
  lastUsedAt: token.lastUsedAt?.toISOString() ?? null,
  revokedAt: token.revokedAt?.toISOString() ?? null,
});
