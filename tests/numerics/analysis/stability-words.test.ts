import { describe, expect, test } from "vitest";
import { stabilityWords } from "@/lib/analysis/stability-words";

const points = (...all: [number, number][]) => all.map(([tauS, deviation]) => ({ tauS, deviation }));

describe("what a stability plot means", () => {
  test("a minimum inside says that longer phases gain nothing", () => {
    const words = stabilityWords({ name: "air", within: points([600, 4e-7], [10_800, 1.2e-7], [21_600, 2e-7]), across: [] });
    expect(words).toBe("Within a phase air is steadiest over 3\u00a0h: 1.2\u2009×\u200910⁻⁷. Longer phases would gain nothing.");
  });

  test("a curve that still falls at its end says that longer phases would help", () => {
    expect(stabilityWords({ name: "air", within: points([600, 4e-7], [1200, 3e-7]), across: [] })).toContain("still getting steadier at 20\u00a0min");
  });

  test("a larger move from phase to phase is named as what limits", () => {
    const words = stabilityWords({ name: "air", within: points([600, 1e-7], [1200, 2e-7]), across: points([200_000, 1.7e-6]) });
    expect(words).toContain("moves 17 times as much (hollow): what limits it lies between the phases");
  });

  test("no larger move from phase to phase is said too", () => {
    expect(stabilityWords({ name: "Water", within: points([600, 1e-7], [1200, 2e-7]), across: points([200_000, 1.2e-7]) })).toContain("no more than that");
  });

  test("without points, or with zeros only, there is nothing to say", () => {
    expect(stabilityWords({ name: "air", within: [], across: points([10, 1]) })).toBeUndefined();
    expect(stabilityWords({ name: "air", within: points([10, 0]), across: [] })).toBeUndefined();
  });
});
