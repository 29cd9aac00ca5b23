import { xoroshiro128plus } from "pure-rand";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid, type Sweep } from "@/lib/numerics/resonance/types";

export type BenchResult = { name: string; value: number; unit: string; ratio?: number };

const SWEEPS = 400;
const POINTS = 201;
const SECONDS = 1.5;
const WARM_UP = 5;
/** Fits per second and core the design asks for. */
const WANTED = 10_000;

/** Sweeps of an oscillator with a large offset and slope, 4 to 20 half-widths wide, no two alike. */
function makeSweeps(): Sweep[] {
  const random = xoroshiro128plus(20_260_101);
  const uniform = (): number => ((random.unsafeNext() >>> 0) + 0.5) / 2 ** 32;
  const normal = (): number => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
  return Array.from({ length: SWEEPS }, () => {
    const f0Hz = 200 + 4800 * uniform();
    const q = 20 * 500 ** uniform();
    const span = ((4 + 16 * uniform()) * f0Hz) / (2 * q);
    const start = f0Hz - (0.25 + 0.5 * uniform()) * span;
    const frequencyHz = linearGrid(start, start + span, POINTS);
    const noise = 0.1 * 100 ** -uniform();
    const { re, im } = evaluateResonance(frequencyHz, {
      readout: "velocity", f0Hz, q, a: { re: 1, im: 0 }, b: { re: 100 * normal(), im: 100 * normal() }, c: { re: normal(), im: normal() },
    });
    for (let i = 0; i < POINTS; i++) {
      re[i] += noise * normal();
      im[i] += noise * normal();
    }
    return { kind: "complex", frequencyHz, re, im };
  });
}

/** Fits per second of processor time, without a guess, of sweeps of 201 points: other work on the machine does not count. */
export async function run(): Promise<BenchResult[]> {
  const sweeps = makeSweeps();
  const pass = (): void => sweeps.forEach((sweep) => fitResonance(sweep, { readout: "velocity" }));
  for (let k = 0; k < WARM_UP; k++) pass();
  const start = process.cpuUsage();
  let fits = 0;
  let seconds = 0;
  while (seconds < SECONDS) {
    pass();
    fits += sweeps.length;
    const { user, system } = process.cpuUsage(start);
    seconds = (user + system) / 1e6;
  }
  const value = Math.round(fits / seconds);
  return [{ name: "resonance fit, 201 points, no guess", value, unit: "fits/s and core", ratio: value / WANTED }];
}
