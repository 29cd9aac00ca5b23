import { expect, test } from "vitest";
import { next, start } from "@/lib/protocol/interpreter";
import type { Facts } from "@/lib/protocol/types";
import { define, drain, dry, fill } from "./definitions";
import { drive } from "./drive";
import { TestWorld } from "./test-world";

type Blocks = Parameters<typeof define>[0];
type Outcome = NonNullable<Facts["last"]>["outcome"];

function cellAfter(blocks: Blocks, outcome: Outcome = "done") {
  const definition = define([...blocks, { kind: "wait", seconds: 1 }]);
  const world = new TestWorld(0);
  const { cursor } = drive(definition, world, { limit: blocks.length });
  world.facts.last = { outcome };
  return next(definition, cursor, world.facts).cursor.cell;
}

test("the cell begins with air", () => {
  expect(start(define([drain])).cell).toEqual({ content: "air" });
});

test("a fill brings its liquid, a second one adds to it, another liquid takes its place", () => {
  expect(cellAfter([fill("a")])).toMatchObject({ content: "liquid", slot: "a", volumeMl: 40, sinceMs: 2 * 3_600_000 });
  expect(cellAfter([fill("a"), fill("a")])).toMatchObject({ slot: "a", volumeMl: 80 });
  expect(cellAfter([fill("a"), fill("b")])).toMatchObject({ slot: "b", volumeMl: 40 });
});

test("a rinse leaves its liquid, drain and dry leave air", () => {
  const rinse = { kind: "rinse" as const, slot: "b", volumeMl: 5, times: 3 };
  expect(cellAfter([fill("a"), drain, rinse])).toMatchObject({ content: "liquid", slot: "b", volumeMl: 5 });
  expect(cellAfter([fill("a"), drain])).toEqual({ content: "air" });
  expect(cellAfter([rinse, dry])).toEqual({ content: "air" });
});

test("what was begun and not done leaves it unknown", () => {
  expect(cellAfter([fill("a", "fill")], "failed")).toEqual({ content: "unknown" });
  expect(cellAfter([fill("a"), drain], "failed")).toEqual({ content: "unknown" });
  expect(cellAfter([dry], "failed")).toEqual({ content: "air" });
});
