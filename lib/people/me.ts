import { audit } from "@/lib/audit/record";
import { inTransaction, row } from "@/lib/db";
import { invalid, notSignedIn } from "@/lib/errors";
import { readLaboratory } from "@/lib/laboratory";
import type { Actor } from "@/lib/people/actor";
import { mailWishes } from "@/lib/people/mail-wishes";
import { hashPassword, passwordMatches } from "@/lib/people/password";
import type { MailWishes, MeAnswer } from "@/lib/people/schema";
import { countTry, forgiveTries } from "@/lib/people/throttle";
import { Person } from "@/models/person";

/** The person and what stands above every page. */
export async function getMe({ by, now }: { by: Actor; now: Date }): Promise<MeAnswer> {
  const [person, laboratory, alarms] = await Promise.all([
    Person.findByPk(by.id),
    readLaboratory(),
    row<{ n: number }>("select count(*)::int as n from alarm where state = 'unacknowledged' and (shelved_until is null or shelved_until <= $1)", [now]),
  ]);
  if (!person) throw notSignedIn();
  const { id, name, email, role, notify } = person;
  return { id, name, email, role, notify: mailWishes({ role, notify }), laboratory, alarms: alarms?.n ?? 0, serverTime: now.toISOString() };
}

export async function changeMe({ by, now, name, notify }: { by: Actor; now: Date; name?: string; notify?: Partial<MailWishes> }): Promise<MeAnswer> {
  await inTransaction(async (transaction) => {
    const person = await Person.findByPk(by.id, { lock: true, transaction });
    if (!person) throw notSignedIn();
    await person.update({ name: name ?? person.name, notify: { ...person.notify, ...notify } }, { transaction });
    await audit(transaction, { by, now, action: "change own settings", entity: "person", entityId: by.id, detail: { name, notify } });
  });
  return getMe({ by, now });
}

/** Ends every session, this one too: whoever has the old cookie has nothing. @throws AppError 400 for a wrong present password. */
export async function changePassword({ by, now, place, current, password }: { by: Actor; now: Date; place: string; current: string; password: string }): Promise<void> {
  await countTry({ account: `password ${by.id}`, place });
  const passwordHash = await hashPassword(password);
  await inTransaction(async (transaction) => {
    const person = await Person.findByPk(by.id, { lock: true, transaction });
    if (!person || !(await passwordMatches(person.passwordHash, current))) throw invalid([{ path: "current", message: "is not your present password" }]);
    await person.update({ passwordHash, sessionVersion: person.sessionVersion + 1 }, { transaction });
    await audit(transaction, { by, now, action: "change password", entity: "person", entityId: by.id });
  });
  await forgiveTries({ account: `password ${by.id}`, place });
}
