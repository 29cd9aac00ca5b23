import type { Done, DrainStep, DryStep, FailureCode, FillStep, Outcome, RinseStep, SettleStep } from "../contract";
import { pumpingS, rinseOnceS, settleS, type World } from "../world";
import { crashIfDue, pumpFailure, thermostatFailure } from "./faults";
import { Interrupted, type Session } from "./session";

type LiquidStep = FillStep | RinseStep | DrainStep | DryStep;

/** Where the step's work stands, in its own measure, and how to say so in a heartbeat. */
type Work = { total: number; before: number; secondsEach: number; done: (amount: number) => Done };

/**
 * Fills, rinses, drains or dries: goes on from what was done already, tells its progress at once, fails as the scenario says. In fast mode
 * nothing is told of what may be repeated anyway.
 */
export async function moveLiquid(session: Session, step: LiquidStep, start: World): Promise<Outcome> {
  const { rig } = session;
  const shortage = shortageOf(session, step, start);
  if (shortage) return shortage;
  const broken = pumpFailure(rig.scenario, rig.world, step);
  if (broken) {
    rig.save();
    return failed("pump", `The pump does not turn at ${step.label || step.kind}`, broken.retry);
  }

  const work = workOf(session, step);
  const slices = rig.isFast ? 2 : 20;
  const share = (work.total - work.before) / slices;
  const until = step.kind === "dry" ? session.interruption : session.signal;
  const tell = async (amount: number): Promise<void> => {
    session.progress(work.done(amount));
    if (!rig.isFast || !isRepeatable(session, step)) await session.tryBeat();
  };
  await tell(work.before);
  for (let slice = 0; slice < slices && share > 0; slice++) {
    try {
      await rig.clock.pass(share * work.secondsEach, until);
    } catch (error) {
      if (error instanceof Interrupted) return { outcome: "interrupted" };
      throw error;
    }
    await tell(work.before + share * (slice + 1));
    if (slice + 1 === slices / 2) crashIfDue(rig.scenario, rig.world, step, 0);
    if (step.kind === "dry" && session.wish !== "none" && slice + 1 < slices) return { outcome: "interrupted" };
  }
  return { outcome: "done" };
}

/** Brings the bath to temperature. */
export async function settle(session: Session, step: SettleStep, start: World): Promise<Outcome> {
  const { rig } = session;
  const { temperatureC, timeoutS } = step.params;
  const { minTemperatureC = Number.NEGATIVE_INFINITY, maxTemperatureC = Number.POSITIVE_INFINITY } = rig.scenario.rig.abilities;
  if (temperatureC < minTemperatureC || temperatureC > maxTemperatureC)
    return failed("thermostat", `The thermostat goes from ${minTemperatureC} to ${maxTemperatureC} °C, not to ${temperatureC} °C`, false);

  const failure = thermostatFailure(rig.scenario, rig.world, step);
  if (failure) {
    rig.save();
    return failed("thermostat", `The bath does not come to ${temperatureC} °C`, failure.retry);
  }
  crashIfDue(rig.scenario, rig.world, step, 0);
  const seconds = settleS(start, step, rig.scenario);
  try {
    await rig.clock.pass(Math.min(seconds, timeoutS), session.interruption);
  } catch (error) {
    if (error instanceof Interrupted) return { outcome: "interrupted" };
    throw error;
  }
  if (seconds > timeoutS) return failed("timeout", `Not steady at ${temperatureC} °C after ${timeoutS} s`, true);
  return session.wish === "none" ? { outcome: "done" } : { outcome: "interrupted" };
}

const isRepeatable = ({ rig }: Session, { kind }: LiquidStep): boolean => rig.scenario.rig.repeatable.includes(kind);

function workOf(session: Session, step: LiquidStep): Work {
  const { scenario } = session.rig;
  switch (step.kind) {
    case "fill": {
      const { volumeMl, flowMlPerMin } = step.params;
      const done = (amount: number): Done => ({ volumeMl: rounded(amount) });
      return { total: volumeMl, before: step.done?.volumeMl ?? 0, secondsEach: pumpingS(1, flowMlPerMin, scenario), done };
    }
    case "rinse":
      return {
        total: step.params.times,
        before: step.done?.times ?? 0,
        secondsEach: rinseOnceS(step, scenario),
        done: (amount) => ({ times: Math.floor(amount + 1e-9) }),
      };
    case "drain":
      return { total: scenario.rig.drainS, before: 0, secondsEach: 1, done: (amount) => ({ seconds: rounded(amount) }) };
    case "dry":
      return { total: step.params.seconds, before: step.done?.seconds ?? 0, secondsEach: 1, done: (amount) => ({ seconds: rounded(amount) }) };
  }
}

/** An empty bottle or a full container, noticed before the pump starts. */
function shortageOf({ rig }: Session, step: LiquidStep, start: World): Outcome | undefined {
  const { params } = step;
  if (step.kind === "dry") return undefined;
  if ("port" in params) {
    const wants = step.kind === "fill" ? step.params.volumeMl : params.volumeMl * ("times" in params ? params.times : 1);
    const has = start.ports[params.port];
    if (has === undefined) return failed("instrument", `This rig has no port ${params.port}`, false);
    if (has < wants) return awaitOperator(rig, String(params.port), "port-empty", `Port ${params.port} has ${rounded(has)} mL, ${wants} mL are needed`);
  }
  const waste = step.kind === "drain" ? start.cellMl : "times" in params ? params.volumeMl * params.times : 0;
  const room = rig.scenario.rig.wasteCapacityMl - start.wasteMl;
  if (waste > room) return awaitOperator(rig, "waste", "waste-full", `The waste container takes ${rounded(room)} mL more, ${rounded(waste)} mL would come`);
  return undefined;
}

function awaitOperator(rig: Session["rig"], what: string, code: FailureCode, message: string): Outcome {
  rig.world = { ...rig.world, awaiting: [...rig.world.awaiting, what] };
  rig.save();
  return failed(code, message, true);
}

const failed = (code: FailureCode, message: string, retry: boolean): Outcome => ({
  outcome: "failed",
  failure: { code, message, retry },
});

const rounded = (value: number): number => Math.round(value * 1000) / 1000;
