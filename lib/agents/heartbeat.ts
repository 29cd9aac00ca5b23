import type { Transaction } from "sequelize";
import { noteContact, type RigRow } from "@/lib/agents/contact";
import { LEASE_S, type Agent } from "@/lib/agents/contract";
import { nextDue } from "@/lib/agents/next-due";
import type { HeartbeatBody } from "@/lib/agents/schema";
import { wishFor } from "@/lib/agents/wish";
import { judgeClockOffset } from "@/lib/alarms/clock-offset";
import { wakeDue } from "@/lib/campaigns/wake-due";
import { change, inTransaction, row } from "@/lib/db";

type HeldStep = { state: string; parking: string; detour: string | null; leaseExpiresAt: Date | null };

/** The agent says how it is: keeps the lease, records progress of physical acts, moves a simulated clock, learns what is wished. */
export function heartbeat({ agent, session, body, now }: { agent: Agent; session?: string; body: HeartbeatBody; now: Date }) {
  return inTransaction(async (transaction) => {
    const rig = await noteContact(transaction, { agent, session, now, clock: body.clock });
    const offsetMs = rig.clock === "real" ? body.clock.getTime() - now.getTime() : null;
    await recordState(transaction, rig, body, offsetMs, now);
    if (offsetMs !== null) await judgeClockOffset(transaction, { rigId: rig.id, offsetMs, now });
    if (rig.clock === "simulated") await wakeDue(transaction, { rigId: rig.id, clock: rig.reportedClock, now });

    const step = body.stepId && body.lease ? await extendLease(transaction, rig, body, now) : undefined;
    const due = body.state === "idle" ? await nextDue(transaction, rig, now) : undefined;
    return {
      serverTime: now.toISOString(),
      wish: wishFor(step),
      ...(step?.leaseExpiresAt ? { leaseExpiresAt: step.leaseExpiresAt.toISOString() } : {}),
      ...(due ? { dueAt: due.toISOString() } : {}),
    };
  });
}

async function recordState(transaction: Transaction, rig: RigRow, body: HeartbeatBody, offsetMs: number | null, now: Date) {
  await change(
    `update rig set agent_state = $2, agent_message = $3, temperature_c = coalesce($4, temperature_c), waste_ml = coalesce($5, waste_ml),
       clock_offset_ms = $6 where id = $1`,
    [rig.id, body.state, body.message ?? null, body.temperatureC ?? null, body.wasteMl ?? null, offsetMs],
    transaction,
  );
  await change(
    `insert into heartbeat (rig_id, at, clock, offset_ms, state, step_id, temperature_c, waste_ml, message)
     values ($1, $2, $3, $4, $5, (select id from step where id = $6::bigint and rig_id = $1), $7, $8, $9)`,
    [rig.id, now, body.clock, offsetMs, body.state, idOf(body) ?? null, body.temperatureC ?? null, body.wasteMl ?? null, body.message ?? null],
    transaction,
  );
  if (body.ports?.length) {
    await change(
      `update port set remaining_ml = told.volume_ml from unnest($2::int[], $3::float8[]) told (number, volume_ml)
        where port.rig_id = $1 and port.number = told.number`,
      [rig.id, body.ports.map(({ port }) => port), body.ports.map(({ volumeMl }) => volumeMl)],
      transaction,
    );
  }
}

/** Ids are opaque to agents: what cannot be one of ours names no step. */
const idOf = ({ stepId }: HeartbeatBody): string | undefined => (stepId !== undefined && /^\d{1,18}$/.test(stepId) ? stepId : undefined);

/** An expired lease stays valid until the step is given out again; progress counts only under the present lease. */
async function extendLease(transaction: Transaction, rig: RigRow, body: HeartbeatBody, now: Date): Promise<HeldStep | undefined> {
  if (idOf(body) === undefined) return undefined;
  return row<HeldStep>(
    `update step set lease_expires_at = $4, done = case when $5::jsonb is null then step.done else coalesce(step.done, '{}') || $5::jsonb end,
       progressed = step.progressed or exists (
         select 1 from jsonb_each_text($5::jsonb) told where told.value::float8 > coalesce((step.done->>told.key)::float8, 0))
       from campaign where campaign.id = step.campaign_id and step.id = $1 and step.rig_id = $2 and step.lease = $3 and step.state = 'out'
     returning campaign.state, campaign.parking, step.detour, step.lease_expires_at as "leaseExpiresAt"`,
    [body.stepId, rig.id, body.lease, new Date(now.getTime() + LEASE_S * 1000), body.done ? JSON.stringify(body.done) : null],
    transaction,
  );
}
