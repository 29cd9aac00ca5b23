import { FluidRangeError } from "@/lib/fluids/fluid-range-error";
import type { Outcome, Step } from "../contract";
import { nominalSeconds, stepName, type World } from "../world";
import { ask } from "./ask";
import { CaughtUp } from "./caught-up";
import { Refused } from "./client";
import { Crash } from "./faults";
import { measure } from "./measure";
import { moveLiquid, settle } from "./physical";
import { Session, SessionLost, type SessionOptions } from "./session";
import { Superseded } from "./uploader";

export type AgentOptions = SessionOptions & { untilIdle?: boolean };

const afterCrashMs = 500;
const afterRefusalMs = 1000;
const otherAgentMs = 10_000;
const idleAfterS = 5;

/**
 * Drives a rig until the signal is aborted, its clock has come to `untilMs`, or there is nothing to do: hello, then step after step. A crash loses the session and
 * all memory and starts over. Throws `Refused` when the server does not know the token.
 */
export async function runAgent(options: AgentOptions): Promise<void> {
  const { log, signal, sleep } = options;
  while (!signal.aborted) {
    const session = new Session(options);
    try {
      await session.open();
      log(`connected as ${session.server.rig.name}`);
      if (session.server.rig.clock === "real" && options.rig.speed.kind !== "real")
        log("the server keeps a real clock for this rig: make it a rig with a simulated clock, or use --speed real");
      await work(session, options.untilIdle ?? false);
      return;
    } catch (error) {
      if (signal.aborted || error instanceof CaughtUp) return;
      const pauseMs = pauseAfter(error);
      if (pauseMs === undefined) throw error;
      log(`${(error as Error).message}; starting again`);
      await (sleep ?? session.sleep)(options.rig.isFast && error instanceof Crash ? 0 : pauseMs, signal).catch(() => undefined);
    } finally {
      session.close(new SessionLost("the session is over"));
    }
  }
}

/** How long to wait before the next hello, or undefined where no hello helps. */
function pauseAfter(error: unknown): number | undefined {
  if (error instanceof Crash) return afterCrashMs;
  if (error instanceof SessionLost) return otherAgentMs;
  if (error instanceof Refused && error.code === "other-agent") return otherAgentMs;
  return undefined;
}

async function work(session: Session, untilIdle: boolean): Promise<void> {
  const incomplete: Incomplete = new Map();
  for (;;) {
    const step = await ask(session, untilIdle ? idleAfterS : undefined);
    if (step) await perform(session, (incomplete.get(stepName(step)) ?? 0) > 1 ? fromTheStart(step) : step, incomplete);
    else if (untilIdle && session.dueAtMs === undefined) return;
  }
}

/** How often the server found readings missing at a step's end. The second time all are sent again: known ones do no harm. */
type Incomplete = Map<string, number>;

const fromTheStart = (step: Step): Step => ({ ...step, missing: undefined, resumeFrom: 0 });

async function perform(session: Session, step: Step, incomplete: Incomplete): Promise<void> {
  const { rig, client, log } = session;
  const start = rig.begin(step);
  session.take(step);
  log(`step ${step.sequence}: ${step.label || step.kind}${step.attempt > 1 ? `, attempt ${step.attempt}` : ""}`);
  try {
    const outcome = await carryOut(session, step, start);
    if (outcome.outcome === "done") rig.done(step);
    // `finish` carries no clock: a wait that follows has to count from the end of this step, whoever is quicker.
    if (rig.isFast) await session.beat(true);
    if (outcome.outcome === "failed") log(`step ${step.sequence} failed: ${outcome.failure.message}`);
    session.release(outcome.outcome === "failed" ? outcome.failure.message : undefined);
    await client.finish(step.id, step.lease, outcome);
  } catch (error) {
    session.release();
    if (error instanceof CaughtUp) {
      await client.finish(step.id, step.lease, { outcome: "interrupted" });
      throw error;
    }
    if (error instanceof Superseded) return log(`step ${step.sequence}: ${error.message}`);
    if (!(error instanceof Refused) || error.code === "other-agent" || error.status === 401 || error.status === 403) throw error;
    log(`step ${step.sequence}: ${error.message}`);
    if (error.status === 422) incomplete.set(stepName(step), (incomplete.get(stepName(step)) ?? 0) + 1);
    if (error.status !== 409) await session.sleep(afterRefusalMs, session.signal);
  }
}

async function carryOut(session: Session, step: Step, start: World): Promise<Outcome> {
  if (step.kind !== "measure" && endMs(session, step, start) > session.untilMs) throw new CaughtUp();
  try {
    switch (step.kind) {
      case "measure":
        return await measure(session, step, start);
      case "settle":
        return await settle(session, step, start);
      default:
        return await moveLiquid(session, step, start);
    }
  } catch (error) {
    if (!(error instanceof FluidRangeError)) throw error;
    return { outcome: "failed", failure: { code: "instrument", message: error.message, retry: false } };
  }
}

/** When a step that begins in this world ends by a fast rig's clock; other clocks have no end to come to. */
function endMs({ rig }: Session, step: Step, start: World): number {
  if (!rig.isFast || start.clockMs === null) return Number.NEGATIVE_INFINITY;
  return start.clockMs + nominalSeconds(start, step, rig.scenario) * 1000;
}
