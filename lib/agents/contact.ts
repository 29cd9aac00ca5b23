import type { Transaction } from "sequelize";
import { endSilence } from "@/lib/alarms/end-silence";
import type { Agent } from "@/lib/agents/contract";
import { row } from "@/lib/db";
import { conflict } from "@/lib/errors";

type Contact = {
  agent: Agent;
  session?: string;
  now: Date;
  clock?: Date;
  /** What is brought is welcome under a session that has ended too. */
  anySession?: boolean;
};

export type RigRow = {
  id: string;
  name: string;
  clock: "real" | "simulated";
  timeZone: string;
  reportedClock: Date | null;
  retiredAt: Date | null;
};

/**
 * Notes that the agent was heard, moves a simulated rig's clock on (it never goes back), and refuses a session that another
 * instance has ended. Locks the rig row: calls of one agent follow each other.
 */
export async function noteContact(transaction: Transaction, { agent, session, now, clock, anySession = false }: Contact): Promise<RigRow> {
  const rig = await row<RigRow & { silentSince: Date | null; sessionOpen: boolean }>(
    `with before as (select id, last_contact_at as silent_since from rig where id = $1 for no key update),
          seen as (update agent_session set last_seen_at = $2 where rig_id = $1 and session = $4 and ended_at is null returning id)
     update rig set last_contact_at = greatest(rig.last_contact_at, $2), reported_clock = greatest(rig.reported_clock, $3)
       from before where rig.id = before.id
      returning rig.id, name, clock, time_zone as "timeZone", reported_clock as "reportedClock", retired_at as "retiredAt",
        before.silent_since as "silentSince", exists (select 1 from seen) as "sessionOpen"`,
    [agent.rigId, now, clock ?? null, session ?? null],
    transaction,
  );
  if (!rig) throw new Error(`rig ${agent.rigId} of a valid token is gone`);
  if (session !== undefined && !rig.sessionOpen && !anySession) {
    throw conflict("Another agent has taken over this rig; say hello again with `replace` to take it back", "other-agent");
  }
  await endSilence(transaction, { rigId: rig.id, lastContactAt: rig.silentSince, now });
  return rig;
}
