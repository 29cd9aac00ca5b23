import { describe, expect, it } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { takeReading } from "@/rig-simulator/agent/measure";
import type { MeasureStep } from "@/rig-simulator/contract";
import { loadScenario, scenarioNames } from "@/rig-simulator/load-scenario";
import { truth } from "@/rig-simulator/physics/truth";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { conditionsOf } from "@/rig-simulator/world";

/** What the fit finds in a simulated phase, less the truth, in its own standard errors. */
function pulls(name: string, port: number | undefined, repeats: number): { f0: number[]; q: number[]; flags: string[] } {
  const scenario = loadScenario(name);
  const rig = new Rig({ scenario, seed: 11, speed: { kind: "fast" }, store: memoryStore(), clockStartMs: 0 });
  const step = (startHz: number, stopHz: number, dwellS: number): MeasureStep => ({
    id: "1", campaignId: "1", campaignNumber: 1, sequence: 3, attempt: 1, lease: "l", resumeFrom: 0, cycle: 1, label: "", kind: "measure",
    params: {
      medium: port ? "liquid" : "air",
      liquid: port ? { slot: "liquid", port, name: "" } : undefined,
      repeats, pauseS: 1, sweep: { startHz, stopHz, points: 61, dwellS, driveV: 0.5 },
    },
  });
  const about = truth(scenario, { seed: 11, campaignNumber: 1, sequence: 3, index: 0 }, conditionsOf(rig.world, step(1, 2, 1)));
  const reach = (8 * about.f0Hz) / (2 * about.q) / 2;
  const dwellS = (5.2 * about.q) / (Math.PI * about.f0Hz);
  const asked = step(about.f0Hz - reach, about.f0Hz + reach, dwellS);
  const conditions = conditionsOf(rig.world, asked);

  const found = { f0: [] as number[], q: [] as number[], flags: [] as string[] };
  for (let index = 0; index < repeats; index++) {
    const { sweep } = takeReading(rig, asked, conditions, index, 0);
    const hz = Float64Array.from(sweep.re, (_, i) => sweep.startHz + ((sweep.stopHz - sweep.startHz) * i) / 60);
    const fit = fitResonance({ kind: "complex", frequencyHz: hz, re: Float64Array.from(sweep.re), im: Float64Array.from(sweep.im) }, { readout: scenario.sensor.readout, dwellS });
    const real = truth(scenario, { seed: 11, campaignNumber: 1, sequence: 3, index }, conditions);
    found.f0.push((fit.f0Hz - real.f0Hz) / fit.f0StdHz);
    found.q.push((fit.q - real.q) / fit.qStd);
    found.flags.push(...fit.flags);
  }
  return found;
}

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

describe("Longreed's fit of a simulated sweep", () => {
  const media = scenarioNames().flatMap((name) => [undefined, ...loadScenario(name).rig.ports.map(({ port }) => port)].map((port) => ({ name, port })));

  it.each(media)("finds the true f0 and Q within its stated errors: $name, port $port", ({ name, port }) => {
    const { f0, q, flags } = pulls(name, port, 120);
    for (const values of [f0, q]) {
      expect(Math.abs(mean(values))).toBeLessThan(4 / Math.sqrt(values.length));
      expect(Math.sqrt(mean(values.map((value) => value ** 2)))).toBeGreaterThan(0.75);
      expect(Math.sqrt(mean(values.map((value) => value ** 2)))).toBeLessThan(1.25);
    }
    expect(flags.filter((flag) => flag !== "distorted" && flag !== "bent")).toEqual([]);
    expect(flags.length).toBeLessThan(4);
  });
});
