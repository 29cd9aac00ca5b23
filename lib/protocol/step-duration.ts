import type { StepPlan } from "./types";

/** How fast everything goes in a made-up world. */
export type Pace = "fast" | "likely" | "slow";

const AMBIENT_C = 22;

/** What the protocol does not say, by pace. Our guesses from common rigs, no source; the spread is meant to hold nine in ten. */
const GUESS: Record<
  Pace,
  {
    stepS: number;
    repeatS: number;
    sweepFactor: number;
    pumpS: number;
    rinseMlPerMin: number;
    drainS: number;
    settleKPerMin: number;
    settleS: number;
    askS: number;
  }
> = {
  fast: { stepS: 0.2, repeatS: 0.1, sweepFactor: 1, pumpS: 2, rinseMlPerMin: 40, drainS: 20, settleKPerMin: 3, settleS: 30, askS: 300 },
  likely: { stepS: 1, repeatS: 0.5, sweepFactor: 1.05, pumpS: 10, rinseMlPerMin: 20, drainS: 60, settleKPerMin: 1, settleS: 180, askS: 3600 },
  slow: { stepS: 5, repeatS: 2, sweepFactor: 1.25, pumpS: 60, rinseMlPerMin: 10, drainS: 300, settleKPerMin: 0.3, settleS: 900, askS: 57_600 },
};

/**
 * Seconds that a step takes in a made-up world. A sweep takes points × dwell and some more, a fill volume / flow; settling goes
 * at a guessed rate from the present set-point (22 °C before the first), holds, and ends at the latest with its time-out.
 */
export function stepDurationS(step: StepPlan, pace: Pace, nowMs: number): number {
  const guess = GUESS[pace];
  return guess.stepS + ownDurationS(step, guess, nowMs);
}

function ownDurationS(step: StepPlan, guess: (typeof GUESS)[Pace], nowMs: number): number {
  switch (step.kind) {
    case "measure": {
      const { repeats, pauseS, sweep } = step.params;
      return repeats * (sweep.points * sweep.dwellS * guess.sweepFactor + guess.repeatS) + (repeats - 1) * pauseS;
    }
    case "fill":
      return (step.params.volumeMl / step.params.flowMlPerMin) * 60 + guess.pumpS;
    case "drain":
      return guess.drainS;
    case "rinse":
      return step.params.times * ((step.params.volumeMl / guess.rinseMlPerMin) * 60 + guess.pumpS);
    case "dry":
      return step.params.seconds;
    case "settle": {
      const { temperatureC, holdS, timeoutS } = step.params;
      const rampS = (Math.abs(temperatureC - (step.setPointC ?? AMBIENT_C)) / guess.settleKPerMin) * 60;
      return Math.min(holdS + guess.settleS + rampS, timeoutS);
    }
    case "wait":
      return Math.max(0, (step.params.dueAtMs - nowMs) / 1000);
    case "ask":
      return guess.askS;
  }
}
