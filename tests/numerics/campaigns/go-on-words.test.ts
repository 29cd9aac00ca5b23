import { expect, test } from "vitest";
import { wordsOf } from "@/app/(app)/campaigns/[id]/go-on-words";

const measure = { kind: "measure", label: "Air reference", state: "out", stored: 81, repeats: 120 };
const fill = { kind: "fill", label: "Fill water", state: "failed", stored: 0, repeats: null };

test("in a phase it goes on with the next repeat, or measures the phase again beside what there is", () => {
  const { here, phase, cycle } = wordsOf({ step: measure, cycle: 4, parking: "none" });
  expect(here.means).toBe("Goes on with repeat 82 of 120.");
  expect(phase).toEqual({ name: "This phase", means: "Measures the phase again from its beginning; its 81 repeats stay beside." });
  expect(cycle.means).toBe("Begins cycle 4 again, with its reference.");
});

test("a step that measures nothing is called a step", () => {
  expect(wordsOf({ step: fill, cycle: 1, parking: "none" }).here.means).toBe("Goes on with “Fill water”.");
  expect(wordsOf({ step: fill, cycle: 1, parking: "none" }).phase).toEqual({ name: "This step", means: "Makes “Fill water” again, with the cell as it needs it." });
  expect(wordsOf({ step: { ...fill, state: "done" }, cycle: 1, parking: "none" }).phase.means).toBe("“Fill water” is done: goes on with the next step.");
  expect(wordsOf({ step: { ...fill, state: "done" }, cycle: 1, parking: "parked" }).phase.means).toBe("Makes “Fill water” again, with the cell as it needs it.");
});
