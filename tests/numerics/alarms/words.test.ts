import { describe, expect, test } from "vitest";
import { detailOf, stepsFor, titleOf, whatOf } from "@/lib/alarms/words";

const pump = { kind: "step-pump", text: "South bench: could not fill Brine B-35: the level sensor stayed dry for 240 s" };
const reference = { kind: "return", text: "WR-2207 on North bench, cycle 9: air reference: f0 is −72 ppm from the baseline, limit ± 60 ppm" };

describe("title and detail", () => {
  test("a failed step is named by what could not be done, its cause is the detail", () => {
    expect(titleOf(pump)).toBe("could not fill Brine B-35");
    expect(detailOf(pump)).toBe("The level sensor stayed dry for 240 s.");
  });

  test("a limit is named by its kind, its finding is the detail", () => {
    expect(titleOf(reference)).toBe("air reference not back within its limit");
    expect(detailOf(reference)).toBe("Air reference: f0 is −72 ppm from the baseline, limit ± 60 ppm.");
  });

  test("a steady move towards the limit is named as such, since the value is still inside it", () => {
    const moving = { kind: "return", text: "WR-2207 on North bench, cycle 9: air reference: f0 moves away from the baseline steadily (EWMA signal), now −18 ppm, limit ± 60 ppm" };
    expect(titleOf(moving)).toBe("air reference moves away from its baseline");
    expect(detailOf(moving)).toBe("Air reference: f0 moves away from the baseline steadily (EWMA signal), now −18 ppm, limit ± 60 ppm.");
  });

  test("a task that cannot be done ends with what the person said", () => {
    const task = { kind: "task-7", text: "Loft bench: J. Pellick cannot do “Load port 2”: “no lot in the store”" };
    expect(titleOf(task)).toBe("a task cannot be done");
    expect(detailOf(task)).toBe("J. Pellick cannot do “Load port 2”: “no lot in the store”");
  });

  test("a text without a place stands as it is", () => {
    expect(whatOf({ kind: "other", text: "something" })).toBe("something");
    expect(detailOf({ kind: "other", text: "something" })).toBe("");
  });
});

describe("what to do", () => {
  test("a held campaign goes on by a person's word", () => {
    expect(stepsFor({ kind: "step-pump", held: true })).toEqual([expect.stringContaining("rig"), expect.stringContaining("Go on")]);
    expect(stepsFor({ kind: "drift", held: false })).toHaveLength(1);
  });

  test("after silence it goes on by itself", () => {
    expect(stepsFor({ kind: "silence", held: true })).toEqual([expect.stringContaining("by itself")]);
  });
});
