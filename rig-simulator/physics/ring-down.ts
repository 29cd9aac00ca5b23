import type { SweepParams } from "../contract";
import type { Scenario } from "../scenario";
import type { Resonance } from "./immersed";
import { fillNormal, type Key } from "./random";
import { peakV, wholeNanovolts } from "./sweep";

const samplesPerCycle = 4;
const mostSamples = 4096;
const fewestSamples = 256;

/**
 * The free decay after the drive is switched off, sampled as a rig would that was asked for a sweep: about four samples a cycle of
 * its middle, for as long as it would have stayed at one point, five ring-down times or so.
 *
 *   v(t) = A·e^(−πf0t/Q)·cos(2πf0√(1 − 1/4Q²)·t + φ) + b + noise
 *
 * It begins at the height of the driven resonance; f0 and Q stand still. Noise of `noiseV` in each sample.
 *
 * @param key Names the noise.
 * @returns Samples in V, whole nanovolts; their rate in 1/s; the first is taken when the drive goes off.
 */
export function ringDownVolts(
  { signal }: Scenario,
  resonance: Resonance,
  nominal: Resonance,
  { startHz, stopHz, dwellS, driveV }: SweepParams,
  key: Key,
): { sampleHz: number; startS: number; volts: number[] } {
  const { f0Hz, q } = resonance;
  const sampleHz = Math.round((samplesPerCycle * (startHz + stopHz)) / 2);
  const samples = Math.max(fewestSamples, Math.min(mostSamples, Math.round(dwellS * sampleHz)));
  const peak = peakV(signal, resonance, nominal, driveV);
  const decayPerS = (Math.PI * f0Hz) / q;
  const turnPerS = 2 * Math.PI * f0Hz * Math.sqrt(1 - 1 / (4 * q * q));
  const noise = fillNormal(key, new Float64Array(samples));
  const volts = Array.from(noise, (normal, i) => {
    const t = i / sampleHz;
    const tone = peak * Math.exp(-decayPerS * t) * Math.cos(turnPerS * t + signal.phaseRad);
    return wholeNanovolts(tone + signal.offsetVPerV[0] * driveV + signal.noiseV * normal);
  });
  return { sampleHz, startS: 0, volts };
}
