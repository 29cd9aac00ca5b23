import { describe, expect, it } from "vitest";
import { start } from "@/lib/protocol/interpreter";
import { runThrough } from "@/lib/protocol/run-through";
import { parseDefinition } from "@/lib/protocol/schema";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { medium } from "@/rig-simulator/physics/medium";
import { nominalInAir, resonanceIn } from "@/rig-simulator/physics/truth";
import { definitions } from "@/scripts/seed/protocols";

/** What a port's liquid makes of the sensor at a temperature, without noise. */
function inLiquid(name: string, port: number, setPointC: number) {
  const scenario = loadScenario(name);
  const conditions = { cycle: 1, port, periodS: 60, setPointC, residualC: 0, secondsSinceDry: null, fillSequence: 1, rinses: 0 };
  const here = { sensorC: setPointC, thermometerC: setPointC, pressurePa: 101_325, humidityPercent: 45 };
  return resonanceIn(scenario, medium(scenario, { seed: 1, campaignNumber: 1, sequence: 1, index: 0 }, conditions, here), setPointC);
}

describe("the demo's scenarios", () => {
  it.each([
    ["twoLiquids", "north-bench", 20],
    ["brine", "south-bench", 20],
    ["cold", "cold-room", 5],
  ] as const)("%s on %s: a day of the physics is a day of the protocol, so that drift per day reads as it was put in", (key, name, setPointC) => {
    const scenario = loadScenario(name);
    const parsed = parseDefinition(definitions[key], () => "never-needed");
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.errors));
    const { abilities, ports } = scenario.rig;
    const world = {
      nowMs: Date.parse("2026-03-02T06:00:00Z"),
      timeZone: "Europe/London",
      abilities,
      nominal: nominalInAir(scenario),
      resonances: Object.fromEntries(ports.map(({ port, name: liquid }) => [liquid, inLiquid(name, port, setPointC)])),
    };
    const { seconds, counts } = runThrough(parsed.definition, world, "fast", start(parsed.definition));
    const stepsPerDay = (counts.get("steps") ?? 0) / (seconds / 86_400);
    expect(stepsPerDay * scenario.pace.hoursPerStep).toBeGreaterThan(22.5);
    expect(stepsPerDay * scenario.pace.hoursPerStep).toBeLessThan(25.5);
  });

  it("six weeks are at least 8 000 repeats in at most 500 steps, each sweep of 51 to 61 points", () => {
    const parsed = parseDefinition(definitions.twoLiquids, () => "never-needed");
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.errors));
    const scenario = loadScenario("north-bench");
    const nominal = nominalInAir(scenario);
    const world = { nowMs: Date.parse("2026-03-02T06:00:00Z"), timeZone: "Europe/London", abilities: scenario.rig.abilities, nominal };
    const { counts, seconds } = runThrough(parsed.definition, world, "fast", start(parsed.definition));
    expect(counts.get("repeats")).toBeGreaterThanOrEqual(8000);
    expect(counts.get("steps")).toBeLessThanOrEqual(485);
    expect(seconds / 86_400).toBeCloseTo(42, 0);
    const points = [...JSON.stringify(parsed.definition).matchAll(/"points":(\d+)/g)].map(([, n]) => Number(n));
    expect(Math.min(...points)).toBeGreaterThanOrEqual(51);
    expect(Math.max(...points)).toBeLessThanOrEqual(61);
    expect(nominal.f0Hz).toBeGreaterThan(2000);
    expect(nominal.q).toBeLessThan(2500);
  });
});
