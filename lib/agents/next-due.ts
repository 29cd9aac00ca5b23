import type { Transaction } from "sequelize";
import type { RigRow } from "@/lib/agents/contact";
import { row } from "@/lib/db";

/**
 * Protocol time at which the next wait, date or start falls due while nothing else can be given out; undefined when a step
 * can be had, a person must act, or nothing is planned.
 */
export async function nextDue(transaction: Transaction, rig: RigRow, now: Date): Promise<Date | undefined> {
  const occupying = await row<{ state: string; parking: string; dueAt: Date | null; kind: string | null; needsAdvance: boolean }>(
    `select c.state, c.parking, s.due_at as "dueAt", s.kind, c.needs_advance as "needsAdvance"
       from campaign c left join step s on s.campaign_id = c.id and s.state in ('ready', 'out')
      where c.rig_id = $1 and c.origin = 'protocol' and not c.set_aside and (c.state in ('running', 'held') or c.parking in ('wanted', 'running'))`,
    [rig.id],
    transaction,
  );
  if (occupying) {
    const waiting = occupying.kind === "wait" && (occupying.state === "running" || occupying.parking === "running");
    return waiting && !occupying.needsAdvance ? (occupying.dueAt ?? undefined) : undefined;
  }
  const start = await row<{ startAt: Date | null }>(
    `select start_at as "startAt" from campaign where rig_id = $1 and state = 'queued' order by start_at nulls first limit 1`,
    [rig.id],
    transaction,
  );
  const clock = rig.clock === "real" ? now : rig.reportedClock;
  if (!start || !clock) return undefined;
  const begins = start.startAt && start.startAt > clock ? start.startAt : clock;
  const blocked = await row<{ to: Date }>(
    `select upper(period) as "to" from maintenance_window where rig_id = $1 and withdrawn_at is null and period @> $2::timestamptz`,
    [rig.id, begins],
    transaction,
  );
  const due = blocked?.to ?? begins;
  return due > clock ? due : undefined;
}
