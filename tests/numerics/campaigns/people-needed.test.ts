import { expect, test } from "vitest";
import { peopleNeeded } from "@/lib/campaigns/people-needed";
import type { Definition } from "@/lib/protocol/schema";

const definition: Definition = {
  name: "Fills",
  readout: "velocity",
  baseline: { airReferences: 3 },
  maxAttempts: 3,
  limits: [],
  blocks: [
    { id: "fill", kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
    { id: "rinse", kind: "rinse", slot: "wash", volumeMl: 10, times: 3 },
    { id: "ask", kind: "ask", instruction: "Look at the wire", urgency: "normal" },
  ],
};
const step = (blockId: string, kind: "fill" | "rinse" | "ask", startS: number, slot?: string) => ({ blockId, kind, startS, slot });
const plan = { definition, fromMs: 1_000_000, isMounted: true, bottles: { sample: { ml: 1000, letter: "W" }, wash: { ml: 1000, letter: "P" } }, wasteMl: 0, wasteCapacityMl: null };

test("nobody is needed while bottles last, the waste has room and nothing is asked", () => {
  expect(peopleNeeded({ ...plan, segments: [step("fill", "fill", 0, "sample"), step("rinse", "rinse", 60, "wash")] })).toEqual([]);
});

test("a sensor that is not mounted is mounted at the beginning", () => {
  expect(peopleNeeded({ ...plan, isMounted: false, segments: [] })).toEqual([{ at: 1_000_000, label: "mount" }]);
});

test("a bottle is loaded before the fill it cannot give, once", () => {
  const segments = [0, 100, 200, 300].map((startS) => step("fill", "fill", startS, "sample"));
  expect(peopleNeeded({ ...plan, bottles: { ...plan.bottles, sample: { ml: 100, letter: "W" } }, segments })).toEqual([{ at: 1_200_000, label: "load W" }]);
});

test("a rinse takes its volume as often as it rinses", () => {
  const segments = [step("rinse", "rinse", 0, "wash"), step("rinse", "rinse", 50, "wash")];
  expect(peopleNeeded({ ...plan, bottles: { ...plan.bottles, wash: { ml: 59, letter: "P" } }, segments })).toEqual([{ at: 1_050_000, label: "load P" }]);
});

test("the waste is emptied each time before it would overflow, counting what is in it already", () => {
  const segments = [0, 100, 200, 300, 400].map((startS) => step("fill", "fill", startS, "sample"));
  expect(peopleNeeded({ ...plan, wasteMl: 50, wasteCapacityMl: 100, segments }).map(({ at, label }) => [at, label])).toEqual([[1_100_000, "waste"], [1_300_000, "waste"]]);
});

test("what the protocol asks is a need of its own, in the order of time", () => {
  const rings = peopleNeeded({ ...plan, isMounted: false, segments: [step("ask", "ask", 10), step("fill", "fill", 20, "sample")] });
  expect(rings.map(({ label }) => label)).toEqual(["mount", "asked"]);
});
