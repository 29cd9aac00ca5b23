import { xoroshiro128plus } from "pure-rand";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { benchAgent, hello, nextStep, startBenchLaboratory, type Step } from "../lib/bench-laboratory";
import type { BenchResult } from "./fits";

const SWEEPS = 200;
const POINTS = 61;
const ROUNDS = 40;
const WARM_UP = 10;
/** Milliseconds that the design allows from `finish` to the next step, at the 95th percentile. */
const WANTED_MS = 150;

/** From sending `finish` to holding the next step, with 200 sweeps in the phase: built web and worker, loopback, one rig. */
export async function run(): Promise<BenchResult[]> {
  const undoing: (() => Promise<void> | void)[] = [];
  try {
    const { url, token } = await startBenchLaboratory({ repeats: SWEEPS, points: POINTS }, (undo) => undoing.push(undo));
    const times = await measure(url, token);
    const sorted = times.toSorted((a, b) => a - b);
    const at = (share: number) => sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)];
    return [
      { name: "finish to next step, 200 sweeps, p50", value: Math.round(at(0.5)), unit: "ms" },
      { name: "finish to next step, 200 sweeps, p95", value: Math.round(at(0.95)), unit: "ms", ratio: WANTED_MS / at(0.95) },
    ];
  } finally {
    for (const undo of undoing.reverse()) await undo();
  }
}

async function measure(url: string, token: string): Promise<number[]> {
  const agent = benchAgent(url, token);
  await hello(agent);
  const times: number[] = [];
  let step = await nextStep(agent);
  while (times.length < WARM_UP + ROUNDS) {
    const { id, lease, params } = step;
    const readings = Array.from({ length: params.repeats }, (_, index) => reading(step, index));
    for (let from = 0; from < readings.length; from += 50) await agent(`steps/${id}/readings`, { lease, readings: readings.slice(from, from + 50) });
    const begun = performance.now();
    await agent(`steps/${id}/finish`, { lease, outcome: "done" });
    step = await nextStep(agent);
    if (params.repeats === SWEEPS) times.push(performance.now() - begun);
  }
  return times.slice(WARM_UP);
}

const random = xoroshiro128plus(20_260_102);
const noise = (): number => ((random.unsafeNext() >>> 0) / 2 ** 32 - 0.5) * 2e-4;

/** A sweep of a sensor with f0 2400 Hz and Q 2000 as an agent sends it. */
function reading({ params: { sweep } }: Step, index: number) {
  const frequencyHz = linearGrid(sweep.startHz, sweep.stopHz, sweep.points);
  const model = { readout: "velocity" as const, f0Hz: 2400 * (1 + noise() * 1e-2), q: 2000, a: { re: 0.1, im: 0.02 }, b: { re: 0.001, im: 0 }, c: { re: 0, im: 0 } };
  const { re, im } = evaluateResonance(frequencyHz, model);
  const { startHz, stopHz } = sweep;
  const list = (values: Float64Array) => Array.from(values, (value) => value + noise() * 0.01);
  return { index, takenAt: new Date().toISOString(), temperatureC: 20, sweep: { startHz, stopHz, re: list(re), im: list(im) } };
}
