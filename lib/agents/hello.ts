import { randomBytes } from "node:crypto";
import { noteContact } from "@/lib/agents/contact";
import { CONTRACT, HEARTBEAT_S, LEASE_S, MAX_BODY_BYTES, MAX_READINGS, SESSION_FRESH_S, WAIT_S, type Agent } from "@/lib/agents/contract";
import type { HelloBody } from "@/lib/agents/schema";
import { audit } from "@/lib/audit/record";
import { wakeRig } from "@/lib/campaigns/free-rig";
import { change, inTransaction, row } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { notify } from "@/lib/notify";

type OpenSession = { id: string; instance: string | null; lastSeenAt: Date; agentName: string };

/** An agent introduces itself and gets a session. A second instance is refused while the first is fresh, unless it says `replace`. */
export function hello({ agent, body, now }: { agent: Agent; body: HelloBody; now: Date }) {
  return inTransaction(async (transaction) => {
    const rig = await noteContact(transaction, { agent, now, clock: body.clock });
    const open = await row<OpenSession>(
      `select id, instance, last_seen_at as "lastSeenAt", agent_name as "agentName" from agent_session where rig_id = $1 and ended_at is null`,
      [rig.id],
      transaction,
    );
    const { instance } = body.agent;
    if (open && !body.replace && instance !== undefined && open.instance !== null && open.instance !== instance) {
      if (now.getTime() - open.lastSeenAt.getTime() < SESSION_FRESH_S * 1000) {
        throw conflict(
          `Another instance (${open.instance}) of ${open.agentName} drives this rig and was heard at ${open.lastSeenAt.toISOString()}; end it first, or send \`replace: true\``,
          "other-agent",
        );
      }
    }
    if (open) await change(`update agent_session set ended_at = $2 where id = $1`, [open.id, now], transaction);

    const session = randomBytes(18).toString("base64url");
    await change(
      `insert into agent_session (rig_id, agent_token_id, session, agent_name, agent_version, instance, repeatable, started_at, last_seen_at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $8)`,
      [rig.id, agent.tokenId, session, body.agent.name, body.agent.version, instance ?? null, body.abilities.repeatable ?? [], now],
      transaction,
    );
    await change(
      `update rig set abilities = $2, clock_offset_ms = case when clock = 'real' then $3::float8 end where id = $1`,
      [rig.id, JSON.stringify(body.abilities), body.clock.getTime() - now.getTime()],
      transaction,
    );
    if (open && open.instance !== (instance ?? null)) {
      await audit(transaction, {
        by: { rigId: rig.id, name: rig.name },
        now,
        action: "replace agent",
        entity: "rig",
        entityId: rig.id,
        detail: { from: open.instance, to: instance ?? null },
      });
    }
    await notify(`rig:${rig.id}`, transaction);
    await wakeRig(transaction, { rigId: rig.id });
    return {
      rig: { id: rig.id, name: rig.name, clock: rig.clock },
      session,
      contract: CONTRACT,
      serverTime: now.toISOString(),
      leaseS: LEASE_S,
      heartbeatS: HEARTBEAT_S,
      waitS: WAIT_S,
      maxBodyBytes: MAX_BODY_BYTES,
      maxReadings: MAX_READINGS,
    };
  });
}
