import { noteContact, type RigRow } from "@/lib/agents/contact";
import { WAIT_S, type Agent } from "@/lib/agents/contract";
import type { NextBody, StepAnswer } from "@/lib/agents/schema";
import { wakeDue } from "@/lib/campaigns/wake-due";
import { inTransaction } from "@/lib/db";
import { listener } from "@/lib/listener";
import { giveOut } from "@/lib/steps/give-out";

type Ask = { agent: Agent; session?: string; body: NextBody; now: () => Date; signal?: AbortSignal };

/**
 * The next step for the rig, or undefined when there is none within `waitS`. Asking while a step is out returns that step
 * with a fresh lease. Costs one look at the tables, another for each time something is said about the rig, and a last one.
 */
export async function nextStep({ agent, session, body, now, signal }: Ask): Promise<StepAnswer | undefined> {
  const waitS = Math.min(body.waitS ?? 0, WAIT_S);
  const until = performance.now() + waitS * 1000;
  if (waitS > 0) await listener().connect();

  for (;;) {
    const waiter = listener().register(`rig:${agent.rigId}`);
    let step: StepAnswer | undefined;
    try {
      step = await look({ agent, session, clock: body.clock, now: now() });
    } catch (error) {
      waiter.drop();
      throw error;
    }
    const leftMs = until - performance.now();
    if (step || leftMs <= 0 || signal?.aborted) {
      waiter.drop();
      return step;
    }
    await waiter.until(leftMs, signal);
  }
}

type Look = { agent: Agent; session?: string; clock?: Date; now: Date };

function look({ agent, session, clock, now }: Look): Promise<StepAnswer | undefined> {
  return inTransaction(async (transaction) => {
    const rig: RigRow = await noteContact(transaction, { agent, session, now, clock });
    if (rig.clock === "simulated" && clock) await wakeDue(transaction, { rigId: rig.id, clock: rig.reportedClock, now });
    return giveOut(transaction, { rig, session, now });
  });
}
