import { Op } from "sequelize";
import { z } from "zod";
import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { invalid, notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import type { Actor } from "@/lib/people/actor";
import type { TokenAnswer } from "@/lib/people/schema";
import { may } from "@/lib/permissions";
import { newToken } from "@/lib/tokens";
import { AccessToken } from "@/models/access-token";

type Create = { by: Actor; now: Date; name: string; scope: "read" | "write"; expiresAt?: string };

/** A personal access token for scripts. It does what its person may, and with scope "read" changes nothing. Shown this once. */
export async function createToken({ by, now, name, scope, expiresAt }: Create): Promise<{ id: string; token: string }> {
  if (expiresAt && new Date(expiresAt) <= now) throw invalid([{ path: "expiresAt", message: "lies in the past" }]);
  const { token, hash, last4 } = newToken("person");
  return inTransaction(async (transaction) => {
    const made = await AccessToken.create(
      { personId: by.id, name, scope, tokenHash: hash, last4, createdAt: now, expiresAt: expiresAt ? new Date(expiresAt) : null },
      { transaction },
    );
    await audit(transaction, { by, now, action: "make", entity: "access token", entityId: made.id, detail: { name, scope, last4, expiresAt } });
    return { id: made.id, token };
  });
}

/** One's own, newest first; withdrawn ones stay in the list. */
export async function findTokens({ by, limit, cursor }: PageQuery & { by: Actor }): Promise<Page<TokenAnswer>> {
  const after = readCursor(cursor, z.tuple([idSchema]));
  const found = await AccessToken.findAll({
    where: { personId: by.id, ...(after && { id: { [Op.lt]: after[0] } }) },
    order: [["id", "desc"]],
    limit: limit + 1,
  });
  return cutPage(found.map(presentToken), limit, ({ id }) => [id]);
}

/** One's own, or as administrator anybody's. @throws AppError 404 for another's and for none alike. */
export async function getToken({ by, tokenId }: { by: Actor; tokenId: string }): Promise<TokenAnswer> {
  const token = await AccessToken.findByPk(tokenId);
  if (!token || (token.personId !== by.id && !may(by.role, "people"))) throw notFound("token");
  return presentToken(token);
}

/** One's own, or as administrator anybody's. Withdrawing again is a success. */
export function withdrawToken({ by, now, tokenId }: { by: Actor; now: Date; tokenId: string }): Promise<TokenAnswer> {
  return inTransaction(async (transaction) => {
    const token = await AccessToken.findByPk(tokenId, { lock: true, transaction });
    if (!token || (token.personId !== by.id && !may(by.role, "people"))) throw notFound("token");
    if (!token.revokedAt) {
      await token.update({ revokedAt: now }, { transaction });
      await audit(transaction, { by, now, action: "withdraw", entity: "access token", entityId: token.id, detail: { name: token.name, last4: token.last4 } });
    }
    return presentToken(token);
  });
}

const presentToken = ({ id, name, scope, last4, createdAt, expiresAt, revokedAt, lastUsedAt }: AccessToken): TokenAnswer => ({
  id,
  name,
  scope,
  last4,
  createdAt: createdAt.toISOString(),
  expiresAt: expiresAt?.toISOString() ?? null,
  withdrawnAt: revokedAt?.toISOString() ?? null,
  lastUsedAt: lastUsedAt?.toISOString() ?? null,
});
