import type { FitFlag } from "@/lib/numerics/resonance/flags";
import { countInBand, judge } from "@/lib/numerics/resonance/judge";
import { linearGrid } from "@/lib/numerics/resonance/types";

/** The sweep that a rig was asked for. */
export type AskedSweep = { startHz: number; stopHz: number; points: number; dwellS: number };

/**
 * What can be remarked about values that a rig has fitted by itself: where they lie in the sweep it was asked for, which is
 * judged as if it had been sent. Amplitude, noise and residuals are not known, so `noisy`, `distorted` and `bent` are the rig's
 * own to notice.
 *
 * @param asked Frequencies in Hz, different; at least 2 points; dwell per point in s.
 * @returns Flags among `failed` (f0 or Q not positive and finite, or a standard error negative or not finite), `edge`, `narrow`,
 *   `sparse` and `rushed`.
 * @throws RangeError if the points asked for are no whole number ≥ 2 or an end is not finite.
 */
export function judgeGiven(given: { f0Hz: number; q: number; f0StdHz?: number; qStd?: number }, asked: AskedSweep): FitFlag[] {
  const { f0Hz, q, f0StdHz = 0, qStd = 0 } = given;
  const positive = (v: number): boolean => v > 0 && v < Infinity;
  const error = (v: number): boolean => v >= 0 && v < Infinity;
  if (!positive(f0Hz) || !positive(q) || !error(f0StdHz) || !error(qStd)) return ["failed"];
  const { startHz, stopHz, points, dwellS } = asked;
  return judge({
    f0Hz, q, snr: Infinity, low: Math.min(startHz, stopHz), high: Math.max(startHz, stopHz), points,
    pointsInBand: countInBand(linearGrid(startHz, stopHz, points), points, f0Hz, q), lag1: 0, bent: false, dwellS,
  });
}
