import type { Step } from "../contract";
import { linkedController } from "../linked-controller";
import { CaughtUp } from "./caught-up";
import type { Session } from "./session";

/** After these pauses the rig asks whether a date is all that is waited for; together 3.5 s. */
const watchMs = [100, 150, 250, 500, 1000, 1500];

/**
 * Asks for the next step; undefined when there is none for now. A fast clock that has only a date to wait for jumps there; another
 * asks again when the date has come.
 *
 * @throws CaughtUp when that date lies behind the end that the rig's clock has.
 */
export async function ask(session: Session, longestWaitS = session.server.waitS): Promise<Step | undefined> {
  const { rig, client } = session;
  const longestS = Math.min(longestWaitS, session.server.waitS);
  if (!rig.isFast) {
    const step = await client.next(waitFor(session, longestS), rig.reportedClock(), session.signal);
    if (!step) await session.tryBeat();
    return step;
  }

  for (;;) {
    const { controller: poll, unlink } = linkedController(session.signal);
    const jumped = new Jumped();
    const watching = watch(session, (why) => poll.abort(why), jumped, poll.signal);
    try {
      return await client.next(longestS, rig.reportedClock(), poll.signal);
    } catch (error) {
      if (error !== jumped) throw error;
    } finally {
      unlink();
      poll.abort(jumped);
      await watching;
    }
  }
}

/** The clock has moved on, so the poll must tell it. */
class Jumped extends Error {}

async function watch(session: Session, end: (why: Error) => void, jumped: Jumped, signal: AbortSignal): Promise<void> {
  const { rig } = session;
  try {
    for (let i = 0; !signal.aborted; i++) {
      await session.sleep(watchMs[i] ?? session.server.heartbeatS * 1000, signal);
      await session.tryBeat();
      if (signal.aborted) return;
      if (session.dueAtMs !== undefined && session.dueAtMs > rig.clock.nowMs()) {
        if (session.dueAtMs > session.untilMs) return end(new CaughtUp());
        rig.jumpTo(session.dueAtMs);
        return end(jumped);
      }
    }
  } catch {
    // The poll was answered, or the session ended: `ask` knows.
  }
}

/** Whole seconds of real time until the date that is waited for, at most the longest wait. */
function waitFor({ rig, dueAtMs }: Session, longestS: number): number {
  if (dueAtMs === undefined) return longestS;
  const factor = rig.speed.kind === "times" ? rig.speed.factor : 1;
  return Math.min(longestS, Math.max(0, Math.ceil((dueAtMs - rig.clock.nowMs()) / 1000 / factor)));
}
