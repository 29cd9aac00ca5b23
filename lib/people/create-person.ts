import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { demand, type Actor, type By } from "@/lib/people/actor";
import { hashPassword } from "@/lib/people/password";
import { presentPerson } from "@/lib/people/present";
import type { PersonAnswer } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";
import { Person } from "@/models/person";

type Account = { email: string; name: string; role: Role; password: string };

/** An account with a password that the administrator hands over; an invitation is the better way. */
export async function createPerson({ by, now, ...account }: Account & { by: Actor; now: Date }): Promise<PersonAnswer> {
  demand(by, "people");
  const passwordHash = await hashPassword(account.password);
  return inTransaction(async (transaction) => presentPerson(await insertPerson(transaction, { ...account, by, now, passwordHash })));
}

/** Within the caller's transaction. Two that give one address meet in the unique constraint. */
export async function insertPerson(
  transaction: Transaction,
  { by, now, email, name, role, passwordHash }: Omit<Account, "password"> & { by: By | "self"; now: Date; passwordHash: string },
): Promise<Person> {
  const address = email.trim().toLowerCase();
  if (await Person.findOne({ where: { email: address }, transaction })) throw conflict(`Somebody has the address ${address} already`, "exists");
  const person = await Person.create({ email: address, name: name.trim(), role, passwordHash, createdAt: now }, { transaction });
  const author = by === "self" ? { id: person.id, name: person.name, role } : by;
  await audit(transaction, { by: author, now, action: "create", entity: "person", entityId: person.id, detail: { email: address, role } });
  return person;
}
