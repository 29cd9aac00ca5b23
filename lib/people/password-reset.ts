import { Op } from "sequelize";
import { audit } from "@/lib/audit/record";
import { change, inTransaction } from "@/lib/db";
import { env } from "@/lib/env";
import { gone } from "@/lib/errors";
import { writeLetter } from "@/lib/people/letter";
import { hashPassword } from "@/lib/people/password";
import { countTry } from "@/lib/people/throttle";
import { hashToken, newToken } from "@/lib/tokens";
import { PasswordReset } from "@/models/password-reset";
import { Person } from "@/models/person";

const GOOD_FOR_MS = 3600 * 1000;

/** Mails a link, good for an hour, if somebody has the address; the answer is the same if nobody has. */
export async function askForReset({ email, place, now }: { email: string; place: string; now: Date }): Promise<void> {
  await countTry({ account: `reset ${email}`, place });
  const person = await Person.findOne({ where: { email, closedAt: null } });
  if (!person) return;
  const { token, hash } = newToken("reset");
  await inTransaction(async (transaction) => {
    const reset = await PasswordReset.create(
      { personId: person.id, tokenHash: hash, createdAt: now, expiresAt: new Date(now.getTime() + GOOD_FOR_MS) },
      { transaction },
    );
    await writeLetter(transaction, {
      now,
      personId: person.id,
      address: person.email,
      kind: `password-reset:${reset.id}`,
      subject: "A new password for Longreed",
      sentence: "Somebody, you we hope, asked for a new password.",
      foot: "The link is good for an hour. Without it nothing changes.",
      button: { label: "Choose a new password", link: `${env().APP_URL}/new-password/${token}` },
    });
  });
}

/** Sets the password and ends every session. @throws AppError 410 for a link that was used or has run out. */
export async function resetPassword({ token, password, now }: { token: string; password: string; now: Date }): Promise<void> {
  const where = { tokenHash: hashToken(token), usedAt: null, expiresAt: { [Op.gt]: now } };
  // Hashing is costly by intent: nobody has it done without a link that is good.
  if (!(await PasswordReset.findOne({ where }))) throw spent();
  const passwordHash = await hashPassword(password);
  await inTransaction(async (transaction) => {
    const reset = await PasswordReset.findOne({ where, lock: true, transaction });
    const person = reset && (await Person.findByPk(reset.personId, { lock: true, transaction }));
    if (!person || person.closedAt) throw spent();
    await change("update password_reset set used_at = $2 where person_id = $1 and used_at is null", [person.id, now], transaction);
    await person.update({ passwordHash, sessionVersion: person.sessionVersion + 1 }, { transaction });
    await audit(transaction, { by: person, now, action: "reset password", entity: "person", entityId: person.id });
  });
}

const spent = () => gone("This link was used already or has run out; ask for a new one");
