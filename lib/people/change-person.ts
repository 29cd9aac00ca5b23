import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import { presentPerson } from "@/lib/people/present";
import type { PersonAnswer } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";
import { AccessToken } from "@/models/access-token";
import { Person } from "@/models/person";

type Change = { by: Actor; now: Date; personId: string };

export function changePerson({ by, now, personId, name, role }: Change & { name?: string; role?: Role }): Promise<PersonAnswer> {
  return onPerson({ by, personId }, async (person, transaction) => {
    if (role !== undefined && role !== person.role) await setRole(transaction, { by, now, person, role });
    if (name !== undefined && name !== person.name) {
      await audit(transaction, { by, now, action: "rename", entity: "person", entityId: person.id, detail: { from: person.name, to: name } });
      await person.update({ name }, { transaction });
    }
  });
}

/** Holds from the person's next request on: the role is read from the database each time. */
export function changeRole({ by, now, personId, role }: Change & { role: Role }): Promise<PersonAnswer> {
  return onPerson({ by, personId }, async (person, transaction) => {
    if (role !== person.role) await setRole(transaction, { by, now, person, role });
  });
}

/** Ends every session and token at once. A person is never removed, so that old records keep their name. */
export function closePerson({ by, now, personId }: Change): Promise<PersonAnswer> {
  return onPerson({ by, personId }, async (person, transaction) => {
    if (person.closedAt) return;
    if (person.id === by.id) throw conflict("Another administrator closes your account");
    await keepAnAdministrator(transaction, person);
    await person.update({ closedAt: now, sessionVersion: person.sessionVersion + 1 }, { transaction });
    await AccessToken.update({ revokedAt: now }, { where: { personId: person.id, revokedAt: null }, transaction });
    await audit(transaction, { by, now, action: "close", entity: "person", entityId: person.id });
  });
}

/** The account as it was, with its password but without its tokens. */
export function openPersonAgain({ by, now, personId }: Change): Promise<PersonAnswer> {
  return onPerson({ by, personId }, async (person, transaction) => {
    if (!person.closedAt) return;
    await person.update({ closedAt: null }, { transaction });
    await audit(transaction, { by, now, action: "open again", entity: "person", entityId: person.id });
  });
}

async function onPerson(
  { by, personId }: { by: Actor; personId: string },
  work: (person: Person, transaction: Transaction) => Promise<void>,
): Promise<PersonAnswer> {
  demand(by, "people");
  return inTransaction(async (transaction) => {
    // All administrators first and always in one order: two who close each other meet here, and one stays.
    await Person.findAll({ where: { role: "administrator", closedAt: null }, order: [["id", "asc"]], lock: true, transaction });
    const person = await Person.findByPk(personId, { lock: true, transaction });
    if (!person) throw notFound("person");
    await work(person, transaction);
    return presentPerson(person);
  });
}

async function setRole(transaction: Transaction, { by, now, person, role }: { by: Actor; now: Date; person: Person; role: Role }): Promise<void> {
  if (person.id === by.id) throw conflict("Another administrator changes your role");
  await keepAnAdministrator(transaction, person);
  await audit(transaction, { by, now, action: "change role", entity: "person", entityId: person.id, detail: { from: person.role, to: role } });
  await person.update({ role }, { transaction });
}

async function keepAnAdministrator(transaction: Transaction, person: Person): Promise<void> {
  if (person.role !== "administrator" || person.closedAt) return;
  const administrators = await Person.count({ where: { role: "administrator", closedAt: null }, transaction });
  if (administrators < 2) throw conflict("This is the last administrator; make another one first", "last-administrator");
}
