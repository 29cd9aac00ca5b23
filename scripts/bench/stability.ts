import { xoroshiro128plus } from "pure-rand";
import { averagingFactors } from "@/lib/numerics/stability/averaging-factors";
import { deviation, type Statistic } from "@/lib/numerics/stability/deviation";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import type { BenchResult } from "./fits";

const POINTS = 1_000_000;
const ROUNDS = 3;
const STATISTICS: readonly Statistic[] = ["adev", "oadev", "mdev", "tdev", "hdev", "ohdev", "totdev"];

function makeSeries(): Float64Array {
  const random = xoroshiro128plus(20_260_102);
  return Float64Array.from({ length: POINTS }, () => (random.unsafeNext() >>> 0) / 2 ** 32 - 0.5);
}

/** Reading every value once and doing next to nothing with it: what memory allows. Four sums, so that none waits for another. */
function onePass(y: Float64Array): number {
  let [a, b, c, d] = [0, 0, 0, 0];
  for (let i = 0; i + 3 < y.length; i += 4) {
    a += y[i];
    b += y[i + 1];
    c += y[i + 2];
    d += y[i + 3];
  }
  return a + b + c + d;
}

/** Overlapping Allan deviation as one would write it with whole arrays: running sum, three shifted copies, square, mean. */
function arrayAtATime(y: Float64Array, m: number): number {
  let total = 0;
  const phase = new Float64Array(y.length + 1);
  phase.set(y.map((value) => (total += value)), 1);
  const terms = phase.length - 2 * m;
  const [early, middle, late] = [0, m, 2 * m].map((from) => phase.slice(from, from + terms));
  const differences = late.map((value, i) => value - 2 * middle[i] + early[i]);
  return Math.sqrt(differences.map((value) => value * value).reduce((sum, value) => sum + value, 0) / terms / (2 * m * m));
}

/** Least processor time of a few rounds, in milliseconds: other work on the machine does not count. */
function leastMs(work: () => void): number {
  let least = Infinity;
  for (let round = 0; round < ROUNDS; round++) {
    const start = process.cpuUsage();
    work();
    const { user, system } = process.cpuUsage(start);
    least = Math.min(least, (user + system) / 1000);
  }
  return least;
}

/** Each statistic of 1 000 000 points over all octaves, against one pass over the array for each octave. */
export function run(): Promise<BenchResult[]> {
  const y = makeSeries();
  const factors = averagingFactors("octave", POINTS);
  let kept = 0; // so that no loop is left out as useless
  const passes = leastMs(() => factors.forEach(() => (kept += onePass(y))));
  const rounded = (ms: number) => Number(ms.toPrecision(3));
  const of = (name: string, ms: number): BenchResult => ({ name, value: rounded(ms), unit: `ms, ${factors.length} octaves`, ratio: ms / passes });

  const results = [of("one pass over 1 000 000 values an octave (the yardstick)", passes)];
  for (const statistic of STATISTICS) {
    results.push(of(statistic, leastMs(() => factors.forEach((m) => (kept += deviation(statistic, [y], m)?.deviation ?? 0)))));
  }
  results.push(
    of("oadev, array at a time", leastMs(() => factors.forEach((m) => (kept += arrayAtATime(y, m))))),
    of("oadev curve with noise types and bands", leastMs(() => (kept += stabilityCurve({ stretches: [y], tau0S: 1, statistic: "oadev", taus: "octave", confidence: 0.683 }).points.length))),
  );
  if (!Number.isFinite(kept)) throw new Error("a deviation is not finite");
  return Promise.resolve(results);
}
