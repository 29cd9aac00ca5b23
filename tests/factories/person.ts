import type { CreationAttributes } from "sequelize";
import type { Actor } from "@/lib/people/actor";
import type { Role } from "@/lib/permissions";
import { Person } from "@/models/person";
import { next, now } from "./now";

export function buildPerson(given: Partial<CreationAttributes<Person>> = {}): Promise<Person> {
  const n = next();
  return Person.create({ email: `person-${n}@longreed.example`, name: `Person ${n}`, role: "researcher", createdAt: now, ...given });
}

/** Somebody who does something: what use cases take as `by`. */
export async function actor(role: Role): Promise<Actor> {
  const { id, name } = await buildPerson({ role });
  return { id, name, role };
}
