import { describe, expect, test } from "vitest";
import { amend } from "@/lib/protocol/amend";
import { redirect } from "@/lib/protocol/interpreter";
import type { Definition, DefinitionInput } from "@/lib/protocol/schema";
import type { Cursor } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure, settle } from "./definitions";
import { brief, drive } from "./drive";
import { TestWorld } from "./test-world";

type Blocks = DefinitionInput["blocks"];

const air = measure("air", { id: "air" });
const liquid = measure("a", { id: "liquid" });
const loop = (times: number, blocks: Blocks): Blocks => [{ kind: "repeat", id: "cycles", times, blocks }];
const from = define(loop(10, [air, fill("a", "fill"), liquid, { ...drain, id: "drain" }]), { park: [{ ...drain, id: "park" }] });

/** Moves a campaign that stands on the liquid phase of its second cycle. */
function moved(to: Definition) {
  const world = new TestWorld(0);
  const { cursor } = drive(from, world, { limit: 7 });
  const result = amend(from, to, cursor);
  return "impossible" in result ? result.impossible : brief(drive(to, world, { from: result.cursor, limit: 5 }).steps);
}

describe("a held campaign moves to another version", () => {
  test("and goes on there, with its own counters", () => {
    const to = define([settle(20), ...loop(10, [{ ...dry, id: "new" }, air, fill("a", "fill"), liquid, settle(30), { ...drain, id: "drain" }])]);
    expect(moved(to)).toEqual(["settle 30", "drain", "dry", "reference air", "fill a"]);
  });

  test("ends with the present turn where the repeat has become shorter", () => {
    expect(moved(define(loop(2, [air, liquid, { ...drain, id: "drain" }])))).toEqual(["drain"]);
  });

  test("not where a block on its path is gone, stands elsewhere, or is another kind", () => {
    expect(moved(define(loop(10, [air])))).toBe("The block liquid is not in that version at the place where the campaign stands.");
    expect(moved(define([liquid]))).toBe("The block cycles is not in that version at the place where the campaign stands.");
    expect(moved(define(loop(10, [loop(2, [liquid])[0]].map((block) => ({ ...block, id: "inner" })))))).toMatch(/^The block liquid is not/);
    expect(moved(define(loop(10, [{ ...dry, id: "liquid" }])))).toBe("The block liquid is of another kind in that version.");
  });

  test("not where the list it goes through has become too short", () => {
    const each = (slots: string[]) => define([{ kind: "forEach", id: "each", over: { slots }, blocks: [fill("each", "fill")] }]);
    const { cursor } = drive(each(["a", "b", "c"]), new TestWorld(0), { limit: 3 });
    expect(amend(each(["a", "b", "c"]), each(["a", "b"]), cursor)).toHaveProperty("impossible");
    expect(amend(each(["a", "b", "c"]), each(["a", "b", "d"]), cursor)).toHaveProperty("cursor");
  });

  test("not in the middle of a parking that the new version does not have", () => {
    const world = new TestWorld(0);
    const { cursor } = drive(from, world, { limit: 3 });
    const parking = drive(from, world, { from: redirect(from, cursor, { kind: "park" }) as Cursor, limit: 1 });
    expect(amend(from, from, parking.cursor)).toEqual({ cursor: parking.cursor });
    expect(amend(from, { ...from, park: [] }, parking.cursor)).toHaveProperty("impossible");
  });

  test("without what limits had asked for that are gone", () => {
    const { cursor } = drive(from, new TestWorld(0), { limit: 3 });
    const asked: Cursor = { ...cursor, due: [{ limitId: "old", maxTimes: 2 }], cleanedAgain: { old: { times: 1, medium: "air" } } };
    expect(amend(from, { ...from, cleaning: from.park }, asked)).toEqual({ cursor: { ...cursor, cleanedAgain: {} } });
  });
});
