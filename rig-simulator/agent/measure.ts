import type { MeasureStep, Outcome, Reading } from "../contract";
import { conditionsOf, repeatPeriodS, type World } from "../world";
import { repeatKey, type Conditions, type Moment } from "../physics/moment";
import { processes } from "../physics/processes";
import { truth } from "../physics/truth";
import type { Rig } from "../rig";
import { CaughtUp } from "./caught-up";
import { crashIfDue } from "./faults";
import { measured } from "./measured";
import { Interrupted, type Session } from "./session";
import { Uploader } from "./uploader";

const oldestMs = 5000;
const fastBatch = 100;

/** Takes the repeats that are still wanted and uploads them; ends after the present one when the server wishes so. */
export async function measure(session: Session, step: MeasureStep, start: World): Promise<Outcome> {
  const { rig, client, server } = session;
  const refusal = beyondAbilities(rig, step);
  if (refusal) return { outcome: "failed", failure: { code: "instrument", message: refusal, retry: false } };

  const conditions = conditionsOf(start, step);
  const { sweep, pauseS } = step.params;
  const sweepS = sweep.points * sweep.dwellS;
  const uploader = new Uploader({
    client,
    stepId: step.id,
    lease: step.lease,
    maxReadings: rig.isFast ? Math.min(fastBatch, server.maxReadings) : server.maxReadings,
    maxBodyBytes: server.maxBodyBytes,
    nowMs: () => performance.now(),
    onAnswer: (answer) => {
      session.heed(answer.wish);
      if (answer.differs.length > 0) session.log(`step ${step.sequence}: the server has other content for ${answer.differs.join(", ")}`);
    },
  });

  for (const index of wanted(step)) {
    crashIfDue(rig.scenario, rig.world, step, index);
    if (session.wish !== "none") {
      await uploader.drain();
      return { outcome: "interrupted" };
    }
    const takenAtMs = rig.isFast && start.clockMs !== null ? start.clockMs + Math.round(index * repeatPeriodS(step.params) * 1000) : rig.clock.nowMs();
    if (rig.isFast && takenAtMs + sweepS * 1000 > session.untilMs) {
      await uploader.drain();
      throw new CaughtUp();
    }
    rig.clock.set?.(takenAtMs);
    await rig.clock.pass(sweepS, session.signal);
    uploader.add(takeReading(rig, step, conditions, index, takenAtMs));
    if (uploader.isDue(oldestMs)) await uploader.send();
    if (pauseS > 0) await pause(session, pauseS);
  }
  await uploader.drain();
  return { outcome: "done" };
}

/** One reading, wholly decided by seed, campaign, step and index. */
export function takeReading(rig: Rig, step: MeasureStep, conditions: Conditions, index: number, takenAtMs: number): Reading {
  const { scenario, seed } = rig;
  const moment: Moment = { seed, campaignNumber: step.campaignNumber, sequence: step.sequence, index };
  const { f0Hz, q, climate } = truth(scenario, moment, conditions);
  const { sweep } = step.params;
  const takenAt = rig.timeText(takenAtMs);
  rig.onTruth({ campaignNumber: step.campaignNumber, sequence: step.sequence, index, takenAt, f0Hz, q, sensorC: climate.sensorC });
  return {
    index,
    takenAt,
    durationS: sweep.points * sweep.dwellS,
    temperatureC: round(climate.thermometerC, 5),
    pressurePa: round(climate.pressurePa, 1),
    humidityPercent: round(climate.humidityPercent, 2),
    ...measured(scenario, { f0Hz, q }, rig.nominal, sweep, repeatKey(moment, processes.sweep)),
  };
}

/** The indices to take: the gaps that the server names, else all from `resumeFrom`. */
export function* wanted(step: MeasureStep): Generator<number> {
  const last = step.params.repeats - 1;
  for (const [from, to] of step.missing ?? [[step.resumeFrom, last]]) for (let index = from; index <= Math.min(to, last); index++) yield index;
}

async function pause(session: Session, pauseS: number): Promise<void> {
  try {
    await session.rig.clock.pass(pauseS, session.interruption);
  } catch (error) {
    if (!(error instanceof Interrupted)) throw error;
  }
}

function beyondAbilities({ scenario: { rig } }: Rig, { params: { sweep } }: MeasureStep): string | undefined {
  const { minHz, maxHz, maxPoints, maxDriveV } = rig.abilities;
  const low = Math.min(sweep.startHz, sweep.stopHz);
  const high = Math.max(sweep.startHz, sweep.stopHz);
  if (low < minHz || high > maxHz) return `Sweeps go from ${minHz} to ${maxHz} Hz, not from ${low} to ${high} Hz`;
  if (sweep.points > maxPoints) return `Sweeps have at most ${maxPoints} points, not ${sweep.points}`;
  if (sweep.driveV > maxDriveV) return `The drive goes to ${maxDriveV} V, not to ${sweep.driveV} V`;
  return undefined;
}

const round = (value: number, digits: number): number => Math.round(value * 10 ** digits) / 10 ** digits;
