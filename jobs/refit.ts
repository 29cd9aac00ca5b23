import type { PgBoss } from "pg-boss";
import { send } from "@/jobs/queues";
import { carryOn, findWaitingRuns } from "@/lib/fit-runs/carry-on";

/** Puts every fit run that waits in the queue; one that is there already stays one job. */
export async function queueRefits(boss: PgBoss): Promise<void> {
  for (const fitRunId of await findWaitingRuns()) await send(boss, "refit", { fitRunId }, { key: fitRunId });
}

/** @throws when the worker ends before the run does: another goes on with it where this one stopped. */
export async function makeRefit({ fitRunId }: { fitRunId: string }, { isEnding }: { isEnding: () => boolean }): Promise<void> {
  const isLeft = await carryOn({ fitRunId, now: new Date(), hasTime: () => !isEnding() });
  if (isLeft) throw new Error(`fit run ${fitRunId} goes on with the next worker`);
}
