import { rows } from "@/lib/db";
import { env } from "@/lib/env";
import type { Role } from "@/lib/permissions";

export type DemoAccount = { email: string; name: string; role: Role };

/**
 * The accounts that the sign-in page of a demo offers, with their common password; undefined anywhere else. Whoever was
 * invited or came by a new password has one of their own and is left out.
 */
export async function findDemoAccounts(): Promise<{ password: string; accounts: DemoAccount[] } | undefined> {
  const { LONGREED_DEMO, LONGREED_DEMO_PASSWORD } = env();
  if (!LONGREED_DEMO) return undefined;
  const accounts = await rows<DemoAccount>(
    `select email, name, role from person p
     where closed_at is null and session_version = 1 and not exists (select 1 from invitation where person_id = p.id)
     order by id limit 8`,
  );
  return { password: LONGREED_DEMO_PASSWORD, accounts };
}
