import { xoroshiro128plus } from "pure-rand";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { benchAgent, hello, nextStep, startBenchLaboratory, type Step } from "./bench-laboratory";
import type { BenchResult } from "../bench/fits";

const POINTS = 61;
export type Setting = { rigs: number; sweeps: number; rounds: number; warmUp: number; everyMs: number; wantedP95Ms?: number };

/** From sending `finish` to holding the next step: built web and worker, loopback, sender on the same machine. */
export async function timeNextStep(setting: Setting): Promise<BenchResult[]> {
  const { rigs, sweeps, wantedP95Ms } = setting;
  const undoing: (() => Promise<void> | void)[] = [];
  try {
    const { url, tokens } = await startBenchLaboratory({ repeats: sweeps, points: POINTS, rigs }, (undo) => undoing.push(undo));
    const times = await Promise.all(tokens.map((token, i) => measure(url, token, setting, (i * setting.everyMs) / rigs)));
    const sorted = times.flat().toSorted((a, b) => a - b);
    const at = (share: number) => sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)];
    return [0.5, 0.95, 0.99].map((share) => ({
      name: `finish to next step, ${rigs === 1 ? "1 rig" : `${rigs} rigs`}, ${sweeps} sweeps, p${share * 100}`,
      value: Math.round(at(share)),
      unit: "ms",
      ...(wantedP95Ms !== undefined && share === 0.95 ? { ratio: wantedP95Ms / at(share) } : {}),
    }));
  } finally {
    for (const undo of undoing.reverse()) await undo();
  }
}

async function measure(url: string, token: string, { sweeps, rounds, warmUp, everyMs }: Setting, startMs: number): Promise<number[]> {
  const agent = benchAgent(url, token);
  await hello(agent);
  const times: number[] = [];
  const begin = performance.now() + startMs;
  let step = await nextStep(agent);
  while (times.length < warmUp + rounds) {
    const { id, lease, params } = step;
    const readings = Array.from({ length: params.repeats }, (_, index) => reading(step, index));
    await until(begin + times.length * everyMs);
    for (let from = 0; from < readings.length; from += 50) await agent(`steps/${id}/readings`, { lease, readings: readings.slice(from, from + 50) });
    const finished = performance.now();
    await agent(`steps/${id}/finish`, { lease, outcome: "done" });
    step = await nextStep(agent);
    if (params.repeats === sweeps) times.push(performance.now() - finished);
  }
  return times.slice(warmUp);
}

const until = (ms: number) => new Promise((resolve) => setTimeout(resolve, Math.max(0, ms - performance.now())));

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
