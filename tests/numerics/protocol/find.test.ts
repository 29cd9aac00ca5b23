import { describe, expect, test } from "vitest";
import { next, redirect } from "@/lib/protocol/interpreter";
import { type Cursor, trackKey } from "@/lib/protocol/types";
import { define, measure, settle, sweep } from "./definitions";
import { brief, drive } from "./drive";
import { TestWorld } from "./test-world";

const tracked = measure("air", { sweep });

describe("searching for the resonance", () => {
  test("comes first in a medium, at a set-point, that has no good fit yet, and only there", () => {
    const definition = define([tracked, tracked, settle(30), tracked, settle(30), tracked]);
    expect(brief(drive(definition, new TestWorld(0)).steps)).toEqual([
      ...["find air", "reference air", "reference air"],
      ...["settle 30", "find air", "reference air"],
      ...["settle 30", "reference air"],
    ]);
  });

  test("is not made for a sweep in Hz and seconds", () => {
    expect(brief(drive(define([measure("air")]), new TestWorld(0)).steps)).toEqual(["reference air"]);
  });

  test("that finds nothing holds with a failure, and is made again on going on", () => {
    const definition = define([tracked]);
    const world = new TestWorld(0);
    const { cursor } = drive(definition, world, { limit: 1 });
    world.facts.tracks = {};
    const held = next(definition, cursor, world.facts);
    expect(held.action).toEqual({ do: "hold", reason: "failure", text: "No resonance was found in air." });

    const from = redirect(definition, held.cursor, { kind: "resume", from: "here" }) as Cursor;
    const { steps, action } = drive(definition, world, { from });
    expect(brief(steps)).toEqual(["find air", "reference air"]);
    expect(steps.map(({ sequence }) => sequence)).toEqual([2, 3]);
    expect(action.do).toBe("finish");
  });

  test("follows a tracked phase with more than half its fits unusable, then the same measurement once more", () => {
    const definition = define([tracked, measure("a", { sweep })]);
    const { steps, action } = drive(definition, new TestWorld(0, { dirty: [false], unusable: [false, true, false] }));
    expect(brief(steps)).toEqual(["find air", "reference air", "find a", "sample a", "find a", "sample a"]);
    expect(steps.map(({ detour }) => detour)).toEqual(["find", undefined, "find", undefined, "find", "again"]);
    expect(steps.map(({ sequence }) => sequence)).toEqual([1, 2, 3, 4, 5, 6]);
    expect(action.do).toBe("finish");
  });

  test("holds with a failure when that is unusable, too, and begins anew on going on", () => {
    const definition = define([tracked]);
    const world = new TestWorld(0, { dirty: [false], unusable: [true, true, true, false] });
    const held = drive(definition, world);
    expect(held.action).toMatchObject({ do: "hold", reason: "failure" });
    expect(brief(held.steps)).toEqual(["find air", "reference air", "find air", "reference air"]);

    const from = redirect(definition, held.cursor, { kind: "resume", from: "here" }) as Cursor;
    const { steps, action } = drive(definition, world, { from });
    expect(brief(steps)).toEqual(["reference air", "find air", "reference air"]);
    expect(action.do).toBe("finish");
  });

  test("half unusable is not more than half, and a sweep at a fixed frequency is not searched for", () => {
    const world = new TestWorld(0, { dirty: [false], unusable: [true] });
    expect(brief(drive(define([measure("air")]), world).steps)).toEqual(["reference air"]);

    const definition = define([tracked]);
    const { cursor } = drive(definition, world, { limit: 1 });
    world.facts.last = { outcome: "done", phase: { n: 4, nUsed: 2, unusable: 2 } };
    expect(next(definition, cursor, world.facts).action.do).toBe("finish");
  });

  test("a resonance outside the rig's range holds the campaign and says so", () => {
    const world = new TestWorld(0);
    world.facts.tracks = { [trackKey("air", null)]: { f0Hz: 500_000, q: 100 } };
    expect(next(define([tracked]), drive(define([tracked]), world, { limit: 0 }).cursor, world.facts).action).toEqual({
      do: "hold",
      reason: "failure",
      text: "Air reference: the sweep lies outside the rig's range.",
    });
  });
});

describe("a failed step", () => {
  test("holds the campaign, and going on here makes it again under a new number", () => {
    const definition = define([settle(25), tracked]);
    const world = new TestWorld(0);
    const { cursor } = drive(definition, world, { limit: 1 });
    world.facts.last = { outcome: "failed" };
    const held = next(definition, cursor, world.facts);
    expect(held.action).toEqual({ do: "hold", reason: "failure", text: "Settle at 25 °C failed." });
    expect(held.cursor.setPointC).toBeNull();

    const from = redirect(definition, cursor, { kind: "resume", from: "here" }) as Cursor;
    expect(next(definition, from, world.facts).action).toMatchObject({ step: { sequence: 2, kind: "settle" } });
  });

  test("given out again under its own number, and done after all, counts as done", () => {
    const definition = define([settle(25), tracked, measure("air")]);
    const world = new TestWorld(0);
    const { cursor } = drive(definition, world, { limit: 1 });
    world.facts.last = { outcome: "failed" };
    const held = next(definition, cursor, world.facts).cursor;
    world.facts.last = { outcome: "done" };
    const after = next(definition, held, world.facts);
    expect(after.action).toMatchObject({ step: { sequence: 2, role: "find", setPointC: 25 } });

    const from = redirect(definition, held, { kind: "resume", from: "here" }) as Cursor;
    expect(next(definition, from, world.facts).action).toEqual(after.action);
  });
});
