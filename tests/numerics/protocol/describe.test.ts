import { describe as group, expect, test } from "vitest";
import { describe, sentence } from "@/lib/protocol/describe";
import { redirect } from "@/lib/protocol/interpreter";
import type { Cursor } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure, settle, sweep } from "./definitions";
import { drive } from "./drive";
import { TestWorld } from "./test-world";

const definition = define(
  [
    settle(25),
    {
      kind: "repeat",
      times: 12,
      blocks: [
        measure("air"),
        { kind: "forEach", over: { slots: ["water", "oil"] }, blocks: [fill("each"), { kind: "repeat", times: 3, blocks: [measure("each", { sweep })] }, drain] },
        { kind: "untilClean", blocks: [dry], measure: measure("air"), tolerancePpm: 10, maxTimes: 4, otherwise: "hold" },
      ],
    },
  ],
  { park: [drain] },
);

group("where a campaign stands, in words", () => {
  test.each([
    [0, "Before the first step"],
    [1, "Settle at 25 °C"],
    [2, "Cycle 1 of 12, 25 °C, Air reference"],
    [4, "Cycle 1 of 12, 25 °C, water, turn 1 of 3, Find the resonance in water"],
    [6, "Cycle 1 of 12, 25 °C, water, turn 2 of 3, Measure water"],
    [16, "Cycle 1 of 12, 25 °C, cleaning, turn 1 of at most 4, Air check"],
    [17, "Cycle 2 of 12, 25 °C, Air reference"],
  ])("after %i steps", (limit, text) => {
    expect(describe(definition, drive(definition, new TestWorld(0), { limit }).cursor)).toBe(text);
  });

  test("while it parks, and at its end", () => {
    const world = new TestWorld(0);
    const { cursor } = drive(definition, world, { limit: 6 });
    const parking = drive(definition, world, { from: redirect(definition, cursor, { kind: "park" }) as Cursor, limit: 1 });
    expect(describe(definition, parking.cursor)).toBe("Cycle 1 of 12, 25 °C, water, turn 2 of 3, parking, Drain");
    expect(describe(definition, drive(definition, new TestWorld(0)).cursor)).toBe("Finished");
  });
});

test("blocks are sentences", () => {
  const { blocks } = define([
    measure("air", { repeats: 1 }),
    measure("water", { repeats: 12_000, discard: 10, pauseS: 90 }),
    fill("water"),
    { kind: "rinse", slot: "water", volumeMl: 5, times: 3 },
    { kind: "dry", seconds: 5400, flowMlPerMin: 500 },
    settle(25),
    { kind: "wait", until: { weekday: 1, time: "06:30" } },
    { kind: "ask", instruction: "Wipe the tip", urgency: "low" },
    { kind: "repeat", times: 1000, blocks: [drain] },
    { kind: "repeat", until: "2026-12-24", blocks: [drain] },
    { kind: "untilClean", blocks: [dry], measure: measure("air"), tolerancePpm: 10, toleranceQPercent: 2, maxTimes: 4, otherwise: "continue" },
    { kind: "forEach", over: { slots: ["water", "oil"] }, blocks: [fill("each")] },
    { kind: "forEach", over: { temperaturesC: [20, 25.5] }, blocks: [settle("each")] },
  ]);
  expect(blocks.map(sentence)).toEqual([
    "Measure air as the reference, 1 repeat.",
    "Measure water, 12 000 repeats, the first 10 left out, 1 min 30 s apart.",
    "Fill 40 mL of water at 20 mL/min.",
    "Rinse 3 times with 5 mL of water.",
    "Dry for 1 h 30 min at 500 mL/min.",
    "Settle at 25 °C within 0.05 °C for 10 min, at most 2 h.",
    "Wait until Monday 06:30.",
    "Ask a person: Wipe the tip",
    "Repeat 1 000 times.",
    "Repeat until 2026-12-24 is over.",
    "Clean until air is back within 10 ppm and 2 % in Q, at most 4 times, otherwise go on.",
    "For each of water, oil.",
    "At each of 20, 25.5 °C.",
  ]);
});
