import { promisify } from "node:util";
import { gzip } from "node:zlib";
import { xoroshiro128plus } from "pure-rand";
import { row } from "@/lib/db";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { benchAgent, hello, nextStep, startBenchLaboratory, type Step } from "../lib/bench-laboratory";
import type { BenchResult } from "./fits";

const compress = promisify(gzip);

const POINTS = 201;
const REPEATS = 100_000;
const BATCH = 50;
const BATCHES = 300;
const WARM_UP = 40;
/** Uploads under way at once: while the server stores one, the agent encodes the next. */
const ABREAST = 2;
/** Sweeps a second, sender included, on two cores that also run the database. */
const WANTED = 1500;

/** From encoding a sweep at the agent to its fit in the database: built web and worker, loopback, one rig, the sender on the same machine. */
export async function run(): Promise<BenchResult[]> {
  const undoing: (() => Promise<void> | void)[] = [];
  try {
    const { url, tokens: [token] } = await startBenchLaboratory({ repeats: REPEATS, points: POINTS }, (undo) => undoing.push(undo));
    const agent = benchAgent(url, token);
    await hello(agent);
    let step = await nextStep(agent);
    while (step.params.repeats !== REPEATS) {
      await agent(`steps/${step.id}/readings`, { lease: step.lease, readings: sweepsOf(step, 0, step.params.repeats) });
      await agent(`steps/${step.id}/finish`, { lease: step.lease, outcome: "done" });
      step = await nextStep(agent);
    }
    let sent = 0;
    const timed = async (encoding: Encoding, batches: number) => {
      const begun = performance.now();
      await upload({ url, token, step, encoding, from: sent, to: sent + batches });
      const stored = (performance.now() - begun) / 1000;
      sent += batches;
      await fitted(step, sent * BATCH);
      const seconds = (performance.now() - begun) / 1000;
      return { stored: Math.round((batches * BATCH) / stored), fitted: Math.round((batches * BATCH) / seconds) };
    };
    await timed("identity", WARM_UP);
    const plain = await timed("identity", BATCHES);
    const zipped = await timed("gzip", BATCHES);
    return [
      { name: "sweeps of 201 points stored", value: plain.stored, unit: "sweeps/s" },
      { name: "sweeps of 201 points stored and fitted", value: plain.fitted, unit: "sweeps/s", ratio: plain.fitted / WANTED },
      { name: "the same, gzip-encoded by the sender", value: zipped.fitted, unit: "sweeps/s", ratio: zipped.fitted / WANTED },
    ];
  } finally {
    for (const undo of undoing.reverse()) await undo();
  }
}

type Encoding = "identity" | "gzip";

type Upload = { url: string; token: string; step: Step; encoding: Encoding; from: number; to: number };

async function upload({ url, token, step, encoding, from, to }: Upload): Promise<void> {
  const headers = { authorization: `Bearer ${token}`, "content-type": "application/json", "content-encoding": encoding };
  const readings = sweepsOf(step, 0, BATCH);
  const send = async (batch: number) => {
    const text = JSON.stringify({ lease: step.lease, readings: readings.map((reading, i) => ({ ...reading, index: batch * BATCH + i })) });
    const body = encoding === "gzip" ? new Uint8Array(await compress(text, { level: 1 })) : text;
    const answer = await fetch(`${url}/api/agent/steps/${step.id}/readings`, { method: "POST", headers, body });
    if (!answer.ok) throw new Error(`readings: ${answer.status} ${await answer.text()}`);
    await answer.arrayBuffer();
  };
  let next = from;
  const lane = async () => {
    while (next < to) await send(next++);
  };
  await Promise.all(Array.from({ length: ABREAST }, lane));
}

async function fitted(step: Step, n: number): Promise<void> {
  while (((await row<{ n: number }>(`select count(*)::int as n from fit where step_id = $1`, [step.id]))?.n ?? 0) < n) {
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

const random = xoroshiro128plus(20_260_103);
const noise = (): number => ((random.unsafeNext() >>> 0) / 2 ** 32 - 0.5) * 2e-4;

/** Sweeps of a sensor with f0 2400 Hz and Q 2000, no two alike. */
function sweepsOf({ params: { sweep } }: Step, from: number, count: number): { index: number }[] {
  const { startHz, stopHz, points } = sweep;
  const frequencyHz = linearGrid(startHz, stopHz, points);
  return Array.from({ length: count }, (_, i) => {
    const f0Hz = 2400 * (1 + noise() * 1e-2);
    const { re, im } = evaluateResonance(frequencyHz, { readout: "velocity", f0Hz, q: 2000, a: { re: 0.1, im: 0.02 }, b: { re: 0.001, im: 0 }, c: { re: 0, im: 0 } });
    const list = (values: Float64Array) => Array.from(values, (value) => value + noise());
    return { index: from + i, takenAt: new Date().toISOString(), temperatureC: 20, sweep: { startHz, stopHz, re: list(re), im: list(im) } };
  });
}
