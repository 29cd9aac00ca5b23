import { env } from "@/lib/env";
import type { Role } from "@/lib/permissions";
import { Person } from "@/models/person";

export type DemoAccount = { email: string; name: string; role: Role };

/** The accounts that the sign-in page of a demo offers, with their common password; undefined anywhere else. */
export async function findDemoAccounts(): Promise<{ password: string; accounts: DemoAccount[] } | undefined> {
  const { LONGREED_DEMO, LONGREED_DEMO_PASSWORD } = env();
  if (!LONGREED_DEMO) return undefined;
  const people = await Person.findAll({ attributes: ["email", "name", "role"], where: { closedAt: null }, order: [["id", "asc"]], limit: 8 });
  return { password: LONGREED_DEMO_PASSWORD, accounts: people.map(({ email, name, role }) => ({ email, name, role })) };
}
