import { describe, expect, it } from "vitest";
import { fitRecord } from "@/lib/readings/fit-record";
import { parseReadings } from "@/lib/readings/parse-readings";
import { takeReading } from "@/rig-simulator/agent/measure";
import type { MeasureStep, Reading } from "@/rig-simulator/contract";
import { loadScenario, scenarioNames } from "@/rig-simulator/load-scenario";
import { truth } from "@/rig-simulator/physics/truth";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { scenarioSchema, type Scenario } from "@/rig-simulator/scenario";
import { conditionsOf } from "@/rig-simulator/world";

/** What becomes of a reading on its way: sent as JSON, checked, packed for the database, unpacked and fitted. */
function fitOf(reading: Reading, settings: Parameters<typeof fitRecord>[1]) {
  const [{ record }] = parseReadings(JSON.parse(JSON.stringify({ lease: "l", readings: [reading] }))).readings;
  const { kind, startHz = null, stopHz = null, points, data } = record;
  return fitRecord({ kind, startHz, stopHz, points, data: Buffer.from(data.buffer) }, settings);
}

/** What the fit finds in a simulated phase, less the truth, in its own standard errors. */
function pulls(scenario: Scenario, port: number | undefined, repeats: number): { f0: number[]; q: number[]; flags: string[] } {
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
    const reading = takeReading(rig, asked, conditions, index, 0);
    const fit = fitOf(reading, { settings: { offsetSlope: true }, readout: scenario.sensor.readout, asked: asked.params.sweep });
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

  const forms = (["complex", "magnitude"] as const).flatMap((form) => (["even", "downward", "uneven"] as const).map((grid) => ({ form, grid })));
  const sent = [...forms, { form: "ringDown" as const, grid: "even" as const }, { form: "fitted" as const, grid: "even" as const }].flatMap((sends) =>
    ([undefined, 1] as const).flatMap((port) => (["velocity", "displacement"] as const).map((readout) => ({ sends, port, readout }))),
  );

  it.each(sent)("finds the true f0 and Q within its stated errors: sent $sends.form $sends.grid, $readout, port $port", ({ sends, port, readout }) => {
    const quick = loadScenario("quick");
    expectTrue(pulls(scenarioSchema.parse({ ...quick, sends, sensor: { ...quick.sensor, readout }, signal: { noiseV: 2e-5 } }), port, 120));
  });

  it.each(media)("finds the true f0 and Q within its stated errors: $name, port $port", ({ name, port }) => {
    expectTrue(pulls(loadScenario(name), port, 120));
  });

  function expectTrue({ f0, q, flags }: ReturnType<typeof pulls>): void {
    for (const values of [f0, q]) {
      expect(Math.abs(mean(values))).toBeLessThan(4 / Math.sqrt(values.length));
      expect(Math.sqrt(mean(values.map((value) => value ** 2)))).toBeGreaterThan(0.75);
      expect(Math.sqrt(mean(values.map((value) => value ** 2)))).toBeLessThan(1.25);
    }
    expect(flags.filter((flag) => flag !== "distorted" && flag !== "bent")).toEqual([]);
    expect(flags.length).toBeLessThan(4);
  }
});
