import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import { passwordMatches } from "@/lib/people/password";
import { countTry, forgiveTries } from "@/lib/people/throttle";
import { Person } from "@/models/person";

export type SignedIn = Actor & { email: string; sessionVersion: number };

/**
 * The person behind address and password, or undefined without saying which of the two was wrong.
 *
 * @param place Where the request comes from, for the throttle.
 * @throws AppError 429 after too many tries.
 */
export async function signIn({ email, password, place, now }: { email: string; password: string; place: string; now: Date }): Promise<SignedIn | undefined> {
  const account = email.trim().toLowerCase();
  await countTry({ account, place });
  const person = storable(account) ? await Person.findOne({ where: { email: account, closedAt: null } }) : null;
  if (!(await passwordMatches(person?.passwordHash, password)) || !person) return undefined;

  await forgiveTries({ account, place });
  const { id, name, role, sessionVersion } = person;
  await inTransaction((transaction) => audit(transaction, { by: { id, name, role }, now, action: "sign in", entity: "person", entityId: id }));
  return { id, name, role, email: account, sessionVersion };
}

const storable = (text: string) => text.length <= 254 && !text.includes("\0");
