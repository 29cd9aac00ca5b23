import { Op } from "sequelize";
import { z } from "zod";
import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { env } from "@/lib/env";
import { conflict, gone, notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import { demand, type Actor } from "@/lib/people/actor";
import { writeLetter } from "@/lib/people/letter";
import type { InvitationAnswer } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";
import { newToken } from "@/lib/tokens";
import { Invitation } from "@/models/invitation";
import { Person } from "@/models/person";

const GOOD_FOR_MS = 7 * 24 * 3600 * 1000;

type Invite = { by: Actor; now: Date; email: string; name: string; role: Role };

/**
 * A link for one person, good for seven days, mailed and shown to the administrator this once. Inviting the same address
 * again replaces the open invitation: the old link ends.
 */
export async function invite({ by, now, email, name, role }: Invite): Promise<{ id: string; link: string }> {
  demand(by, "people");
  const { token, hash } = newToken("invitation");
  const link = `${env().APP_URL}/invitation/${token}`;
  return inTransaction(async (transaction) => {
    if (await Person.findOne({ where: { email }, transaction })) throw conflict(`Somebody has the address ${email} already`, "exists");
    await Invitation.update({ withdrawnAt: now }, { where: { email, acceptedAt: null, withdrawnAt: null }, transaction });
    const expiresAt = new Date(now.getTime() + GOOD_FOR_MS);
    const made = await Invitation.create({ email, name, role, tokenHash: hash, invitedBy: by.id, createdAt: now, expiresAt }, { transaction });
    await writeLetter(transaction, {
      now,
      personId: by.id,
      address: email,
      kind: `invitation:${made.id}`,
      subject: `${by.name} invites you to Longreed`,
      sentence: `${by.name} invites you to Longreed as ${role}.`,
      foot: "The link is for you alone and good for seven days.",
      button: { label: "Choose a password", link },
    });
    await audit(transaction, { by, now, action: "invite", entity: "invitation", entityId: made.id, detail: { email, role } });
    return { id: made.id, link };
  });
}

/** Newest first. */
export async function findInvitations({ by, now, limit, cursor }: PageQuery & { by: Actor; now: Date }): Promise<Page<InvitationAnswer>> {
  demand(by, "people");
  const after = readCursor(cursor, z.tuple([idSchema]));
  const found = await Invitation.findAll({ where: after ? { id: { [Op.lt]: after[0] } } : {}, order: [["id", "desc"]], limit: limit + 1 });
  const inviters = await Person.findAll({ attributes: ["id", "name"], where: { id: found.map(({ invitedBy }) => invitedBy) } });
  const nameOf = new Map(inviters.map(({ id, name }) => [id, name]));
  return cutPage(found.map((invitation) => present(invitation, nameOf.get(invitation.invitedBy) ?? "", now)), limit, ({ id }) => [id]);
}

/** Withdrawing again is a success; what was accepted is a person by now. */
export function withdrawInvitation({ by, now, invitationId }: { by: Actor; now: Date; invitationId: string }): Promise<void> {
  demand(by, "people");
  return inTransaction(async (transaction) => {
    const invitation = await Invitation.findByPk(invitationId, { lock: true, transaction });
    if (!invitation) throw notFound("invitation");
    if (invitation.acceptedAt) throw conflict("This invitation was accepted; close the person's account instead");
    if (invitation.withdrawnAt) return;
    await invitation.update({ withdrawnAt: now }, { transaction });
    await audit(transaction, { by, now, action: "withdraw", entity: "invitation", entityId: invitation.id, detail: { email: invitation.email } });
  });
}

const stateOf = ({ acceptedAt, withdrawnAt, expiresAt }: Invitation, now: Date): InvitationAnswer["state"] => {
  if (acceptedAt) return "accepted";
  if (withdrawnAt) return "withdrawn";
  return expiresAt <= now ? "expired" : "open";
};

/** @throws AppError 404 for a link that is none of ours, 410 for one that was used, withdrawn or has run out. */
export function demandOpen(invitation: Invitation | null, now: Date): Invitation {
  if (!invitation) throw notFound("invitation");
  const state = stateOf(invitation, now);
  if (state === "accepted") throw gone("This invitation was accepted already: sign in");
  if (state !== "open") throw gone(`This invitation ${state === "withdrawn" ? "was withdrawn" : "has run out"}; ask for a new one`);
  return invitation;
}

const present = (invitation: Invitation, invitedBy: string, now: Date): InvitationAnswer => ({
  id: invitation.id,
  email: invitation.email,
  name: invitation.name,
  role: invitation.role,
  state: stateOf(invitation, now),
  invitedBy,
  createdAt: invitation.createdAt.toISOString(),
  expiresAt: invitation.expiresAt.toISOString(),
});
