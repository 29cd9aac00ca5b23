import type { Measured, SweepParams } from "../contract";
import type { Resonance } from "../physics/immersed";
import { derive, normal, type Key } from "../physics/random";
import { ringDownVolts } from "../physics/ring-down";
import { denseShares, evenShares, peakV, sweepVoltages, wholeNanovolts } from "../physics/sweep";
import type { Scenario } from "../scenario";

/** What an agent sends of one repeat, in the form that its scenario names. */
export function measured(scenario: Scenario, resonance: Resonance, nominal: Resonance, sweep: SweepParams, key: Key): Measured {
  const { form, grid } = scenario.sends;
  if (form === "ringDown") return { ringDown: ringDownVolts(scenario, resonance, nominal, sweep, key) };
  if (form === "fitted") return { fitted: fittedByRig(scenario, resonance, nominal, sweep, key) };

  const { startHz, stopHz, points } = sweep;
  const upward = grid === "uneven" ? denseShares(points) : evenShares(points);
  const shares = grid === "downward" ? upward.toReversed() : upward;
  const { re, im } = sweepVoltages(scenario, resonance, nominal, sweep, key, shares);
  const volts = form === "complex" ? { re, im } : { magnitude: re.map((value, i) => wholeNanovolts(Math.hypot(value, im[i]))) };
  if (grid === "uneven") return { frequencyHz: shares.map((share) => startHz + (stopHz - startHz) * share), ...volts };
  return { sweep: grid === "downward" ? { startHz: stopHz, stopHz: startHz, ...volts } : { startHz, stopHz, ...volts } };
}

/**
 * A rig that fits by itself: values off by normal errors of the size it states, about those of a sweep over eight half-widths
 * (half-width · noise/peak · √(8/points) in f0, twice as much of Q).
 */
function fittedByRig(
  { signal }: Scenario,
  resonance: Resonance,
  nominal: Resonance,
  { points, driveV }: SweepParams,
  key: Key,
): { f0Hz: number; q: number; f0StdHz: number; qStd: number; amplitudeV: number } {
  const { f0Hz, q } = resonance;
  const amplitudeV = peakV(signal, resonance, nominal, driveV);
  const share = (signal.noiseV / amplitudeV) * Math.sqrt(8 / points);
  const f0StdHz = (share * f0Hz) / (2 * q);
  const qStd = 2 * share * q;
  return { f0Hz: f0Hz + f0StdHz * normal(derive(key, 1)), q: q + qStd * normal(derive(key, 2)), f0StdHz, qStd, amplitudeV };
}
