import { inTransaction } from "@/lib/db";
import { insertPerson } from "@/lib/people/create-person";
import { demandOpen } from "@/lib/people/invitations";
import { hashPassword } from "@/lib/people/password";
import { presentPerson } from "@/lib/people/present";
import type { PersonAnswer } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";
import { hashToken } from "@/lib/tokens";
import { Invitation } from "@/models/invitation";

/** Makes the person the invitation speaks of. The token is the permission. */
export async function acceptInvitation({ now, token, name, password }: { now: Date; token: string; name: string; password: string }): Promise<PersonAnswer> {
  const tokenHash = hashToken(token);
  demandOpen(await Invitation.findOne({ where: { tokenHash } }), now);
  const passwordHash = await hashPassword(password);
  return inTransaction(async (transaction) => {
    const invitation = demandOpen(await Invitation.findOne({ where: { tokenHash }, lock: true, transaction }), now);
    const { email, role } = invitation;
    const person = await insertPerson(transaction, { by: "self", now, email, name, role, passwordHash });
    await invitation.update({ acceptedAt: now, personId: person.id }, { transaction });
    return presentPerson(person);
  });
}

/** What the page behind the link shows. @throws AppError 404, 410 */
export async function readInvitation({ now, token }: { now: Date; token: string }): Promise<{ email: string; name: string; role: Role }> {
  const { email, name, role } = demandOpen(await Invitation.findOne({ where: { tokenHash: hashToken(token) } }), now);
  return { email, name, role };
}
