import type { Transaction } from "sequelize";
import { change, row, rows } from "@/lib/db";

export type StepState = {
  id: string;
  sequence: number;
  kind: string;
  role: string | null;
  medium: string | null;
  setPointC: number | null;
  mountId: string | null;
  detour: string | null;
  state: "ready" | "out" | "done" | "failed" | "skipped";
  dueAt: Date | null;
  /** The phase has its summary, or the step has none. */
  settled: boolean;
};

const COLUMNS = `s.id, s.sequence, s.kind, s.role, s.medium, s.set_point_c as "setPointC", s.mount_id as "mountId", s.detour, s.state,
  s.due_at as "dueAt", p.closed_at is not null or p.id is null as settled`;

/** The one step that is ready or out; the database allows no second. */
export const openStep = (transaction: Transaction, campaignId: string) =>
  row<StepState>(
    `select ${COLUMNS} from step s left join phase p on p.step_id = s.id where s.campaign_id = $1 and s.state in ('ready', 'out')`,
    [campaignId],
    transaction,
  );

/** The step made last, when it is closed. */
export const lastClosed = (transaction: Transaction, campaignId: string) =>
  row<StepState>(
    `select ${COLUMNS} from step s left join phase p on p.step_id = s.id where s.campaign_id = $1 order by s.sequence desc limit 1`,
    [campaignId],
    transaction,
  );

/** Both in one look. A step given out again after a detour stands before the last. */
export async function openAndLast(transaction: Transaction, campaignId: string): Promise<{ open?: StepState; last?: StepState }> {
  const found = await rows<StepState>(
    `select ${COLUMNS} from step s left join phase p on p.step_id = s.id
      where s.campaign_id = $1 and (s.state in ('ready', 'out') or s.sequence = (select max(sequence) from step where campaign_id = $1))
      order by s.sequence desc`,
    [campaignId],
    transaction,
  );
  return { open: found.find(({ state }) => state === "ready" || state === "out"), last: found[0] };
}

export async function closeStep(transaction: Transaction, { stepId, clock, now }: { stepId: string; clock: Date; now: Date }): Promise<void> {
  await change(
    `update step set state = 'done', closed_at = $2, ended_clock = $3, started_clock = coalesce(started_clock, $3) where id = $1`,
    [stepId, now, clock],
    transaction,
  );
}

/**
 * The step is not wanted any more: parking, another place to go on from, or the end. A question goes with its step; an errand
 * such as an empty bottle has to be run all the same.
 */
export async function skipStep(transaction: Transaction, { stepId, now }: { stepId: string; now: Date }): Promise<void> {
  await change(`update step set state = 'skipped', closed_at = $2, lease = null, lease_expires_at = null where id = $1`, [stepId, now], transaction);
  await change(
    `update operator_task set state = 'withdrawn' where step_id = $1 and state = 'open' and kind = 'ask'`,
    [stepId],
    transaction,
  );
}
