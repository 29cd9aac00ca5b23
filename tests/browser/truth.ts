import { readFileSync } from "node:fs";
import { overlappingAllanDeviation } from "@/lib/numerics/stability/overlapping-allan-deviation";

export type True = { sequence: number; index: number; takenAt: string; f0Hz: number; q: number };

/** What the simulator's resonator really did, newest line of a repeat last. */
export function readTruth(file: string): Map<string, True> {
  const lines = readFileSync(file, "utf8").trim().split("\n");
  return new Map(lines.map((line) => JSON.parse(line) as True).map((truth) => [`${truth.sequence}/${truth.index}`, truth]));
}

export type Measured = { cycle: number; sequence: number; index: number; medium: string; f0Hz: number; f0StdHz: number };

/** Allan deviation that a perfect analysis would find: of the true values, with the white noise of the fits on top. */
export function expectedDeviation(measured: readonly Measured[], truth: ReadonlyMap<string, True>, m: number): number {
  const bySequence = new Map<number, Measured[]>();
  for (const reading of measured) bySequence.set(reading.sequence, [...(bySequence.get(reading.sequence) ?? []), reading]);
  const mean = measured.reduce((sum, { f0Hz }) => sum + f0Hz, 0) / measured.length;
  const stretches = [...bySequence.values()].map((phase) => Float64Array.from(phase, ({ sequence, index }) => (truth.get(`${sequence}/${index}`)?.f0Hz ?? NaN) / mean - 1));
  const own = overlappingAllanDeviation(stretches, m)?.deviation ?? NaN;
  const fits = measured.reduce((sum, { f0StdHz }) => sum + (f0StdHz / mean) ** 2, 0) / measured.length / m;
  return Math.hypot(own, Math.sqrt(fits));
}
