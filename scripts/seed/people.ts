import { row } from "@/lib/db";
import { createFirstAdministrator } from "@/lib/people/create-administrator";
import type { Actor } from "@/lib/people/actor";
import { createPerson } from "@/lib/people/create-person";
import type { Role } from "@/lib/permissions";

export type Team = Record<Role, Actor>;

/** One account a role, all with the common password of the demo. */
export const demoPeople: readonly { role: Role; email: string; name: string }[] = [
  { role: "administrator", email: "administrator@longreed.example", name: "R. Askelund" },
  { role: "researcher", email: "researcher@longreed.example", name: "M. Tollan" },
  { role: "operator", email: "operator@longreed.example", name: "J. Pellick" },
  { role: "viewer", email: "viewer@longreed.example", name: "E. Varnby" },
];

export async function seedPeople({ password, now }: { password: string; now: Date }): Promise<Team> {
  const [first, ...others] = demoPeople;
  const administrator = (await findActor(first.email)) ?? actorOf(await createFirstAdministrator({ ...first, password, now }));
  const team = { administrator } as Team;
  for (const person of others) {
    team[person.role] = (await findActor(person.email)) ?? actorOf(await createPerson({ ...person, by: administrator, password, now }));
  }
  return team;
}

const actorOf = ({ id, name, role }: Actor): Actor => ({ id, name, role });

const findActor = (email: string): Promise<Actor | undefined> => row<Actor>(`select id, name, role from person where email = $1`, [email]);
