import type { SweepParams } from "../contract";
import type { Scenario } from "../scenario";
import type { Resonance } from "./immersed";
import { fillNormal, type Key } from "./random";

export const wholeNanovolts = (volts: number): number => Math.round(volts * 1e9) / 1e9;

export const evenShares = (points: number): number[] => Array.from({ length: points }, (_, i) => i / (points - 1));

/** Three times as dense in the middle as the mean. */
export const denseShares = (points: number): number[] => evenShares(points).map((t) => t + (Math.sin(2 * Math.PI * t) * 2) / (3 * 2 * Math.PI));

/** Height of the resonance at f0, V: at constant drive it goes with Q·f0, as the speed of a driven oscillator does. */
export const peakV = (signal: Scenario["signal"], { f0Hz, q }: Resonance, nominal: Resonance, driveV: number): number =>
  (signal.peakVPerV * driveV * q * f0Hz) / (nominal.q * nominal.f0Hz);

/**
 * The complex voltages of one sweep.
 *
 *   V(f) = a·u + b + c·(f − f_m)/(f₂ − f₁) + noise,  u = 1/(1 + iQ(f/f0 − f0/f))   (velocity)
 *
 * times f0/(if) in displacement readout. f0 and Q stand still during the sweep.
 *
 * @param scenario Signal levels and readout.
 * @param resonance f0 in Hz and Q during this sweep.
 * @param nominal f0 and Q to which `peakVPerV` refers.
 * @param params The sweep asked for, either direction; at least 2 points.
 * @param key Names the noise.
 * @param shares Where each point lies between start and stop, 0 to 1; even unless given.
 * @returns Real and imaginary parts in V, one per point, whole nanovolts.
 */
export function sweepVoltages(
  { signal, sensor }: Scenario,
  resonance: Resonance,
  nominal: Resonance,
  params: SweepParams,
  key: Key,
  shares: readonly number[] = evenShares(params.points),
): { re: number[]; im: number[] } {
  const { startHz, stopHz, points, driveV } = params;
  const { f0Hz, q } = resonance;
  const peak = peakV(signal, resonance, nominal, driveV);
  const displacement = sensor.readout === "displacement";
  const phase = signal.phaseRad - (displacement ? Math.PI / 2 : 0);
  const aRe = peak * Math.cos(phase);
  const aIm = peak * Math.sin(phase);
  const [bRe, bIm] = signal.offsetVPerV.map((volts) => volts * driveV);
  const [cRe, cIm] = signal.slopeVPerV.map((volts) => volts * driveV);

  const noise = fillNormal(key, new Float64Array(2 * points));
  const re = new Array<number>(points);
  const im = new Array<number>(points);
  for (let i = 0; i < points; i++) {
    const share = shares[i];
    const f = startHz + (stopHz - startHz) * share;
    const x = q * (f / f0Hz - f0Hz / f);
    const size = (displacement ? f0Hz / f : 1) / (1 + x * x);
    // u = (1 − ix)/(1 + x²)
    const uRe = aRe + aIm * x;
    const uIm = aIm - aRe * x;
    re[i] = wholeNanovolts(uRe * size + bRe + cRe * (share - 0.5) + signal.noiseV * noise[2 * i]);
    im[i] = wholeNanovolts(uIm * size + bIm + cIm * (share - 0.5) + signal.noiseV * noise[2 * i + 1]);
  }
  return { re, im };
}
