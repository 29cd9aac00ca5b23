import { describe, expect, test } from "vitest";
import { next, redirect } from "@/lib/protocol/interpreter";
import type { Definition, DefinitionInput } from "@/lib/protocol/schema";
import type { Cursor, Redirection, StepPlan } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure, settle } from "./definitions";
import { brief, drive, stored } from "./drive";
import { TestWorld } from "./test-world";

const cycle = (times: number): DefinitionInput["blocks"][number] => ({
  kind: "repeat",
  times,
  blocks: [measure("air", { id: "air" }), fill("a", "fill"), measure("a", { id: "liquid" }), { ...drain, id: "drain" }, { ...dry, id: "dry" }],
});
const definition = define([settle(25), cycle(3)], {
  park: [drain, dry],
  parkAfterS: 3600,
  cleaning: [{ kind: "rinse", slot: "s", volumeMl: 5, times: 2 }, dry],
  limits: [{ id: "back", kind: "return", does: ["cleanAgain"], tolerancePpm: 10 }],
});

/** Goes to the step with this number, done unless told otherwise, and sends the cursor somewhere. */
function send(redirection: Redirection, { at, given = definition }: { at: number; given?: Definition }) {
  const world = new TestWorld(0);
  const { cursor } = drive(given, world, { limit: at });
  const sent = redirect(given, stored(cursor), redirection);
  if ("impossible" in sent) throw new Error(sent.impossible);
  return { world, cursor: sent };
}

function goOn(world: TestWorld, from: Cursor, limit: number, given = definition) {
  const { steps, cursor, action } = drive(given, world, { from, limit });
  return { told: brief(steps), cycles: steps.map((step: StepPlan) => step.cycle), steps, cursor, action };
}

const to = (cursor: Cursor, redirection: Redirection): Cursor => {
  const sent = redirect(definition, cursor, redirection);
  if ("impossible" in sent) throw new Error(sent.impossible);
  return sent;
};

// Steps of the main line: 1 settle · 2 air · 3 fill · 4 liquid · 5 drain · 6 dry · 7 air (cycle 2) · 8 fill · 9 liquid …

describe("parking", () => {
  test("runs the park blocks when the cell is not empty, then waits", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 4 });
    const parked = goOn(world, cursor, 10);
    expect(parked.told).toEqual(["drain", "dry"]);
    expect(parked.steps.map(({ sequence, detour }) => [sequence, detour])).toEqual([[5, "park"], [6, "park"]]);
    expect(parked.action).toEqual({ do: "parked" });
    expect(next(definition, parked.cursor, world.facts).action).toEqual({ do: "parked" });
  });

  test("does nothing to an empty cell, and going on here loses no step", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 2 });
    const parked = goOn(world, cursor, 10);
    expect(parked.told).toEqual([]);
    expect(parked.action).toEqual({ do: "parked" });
    expect(goOn(world, to(parked.cursor, { kind: "resume", from: "here" }), 2).told).toEqual(["fill a", "sample a"]);
  });

  test("a step that was given up for it is made again on going on here", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 2 });
    world.facts.last = { outcome: "skipped" };
    const parked = goOn(world, cursor, 10);
    expect(goOn(world, to(parked.cursor, { kind: "resume", from: "here" }), 2).told).toEqual(["reference air", "fill a"]);
  });

  test("knows of a fill that ended after the hold, and of one that did not end", () => {
    expect(goOn(...entries(send({ kind: "park" }, { at: 3 })), 10).told).toEqual(["drain", "dry"]);
    const open = send({ kind: "park" }, { at: 3 });
    delete open.world.facts.last;
    expect(goOn(open.world, open.cursor, 10).told).toEqual(["drain", "dry"]);
  });

  test("refuses to go on here", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 4 });
    const parked = goOn(world, cursor, 10);
    expect(redirect(definition, parked.cursor, { kind: "resume", from: "here" })).toHaveProperty("impossible");
  });

  test("from the phase, fills again what the phase was measured in", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 4 });
    const parked = goOn(world, cursor, 10);
    const resumed = goOn(world, to(parked.cursor, { kind: "resume", from: "phase" }), 4);
    expect(resumed.told).toEqual(["fill a", "sample a", "drain", "dry"]);
    expect(resumed.steps.map(({ detour }) => detour)).toEqual(["restore", undefined, undefined, undefined]);
    expect(resumed.cycles).toEqual([1, 1, 1, 1]);
  });

  test("from the phase, also while the parking is still under way", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 4 });
    const parking = goOn(world, cursor, 1);
    expect(parking.told).toEqual(["drain"]);
    expect(goOn(world, to(parking.cursor, { kind: "resume", from: "phase" }), 2).told).toEqual(["fill a", "sample a"]);
  });

  test("from the phase, settles again where parking changed the temperature", () => {
    const given = define([settle(25), cycle(3)], { park: [drain, settle(20)] });
    const { world, cursor } = send({ kind: "park" }, { at: 4, given });
    const parked = goOn(world, cursor, 10, given);
    const resumed = goOn(world, redirect(given, parked.cursor, { kind: "resume", from: "phase" }) as Cursor, 3, given);
    expect(resumed.told).toEqual(["fill a", "settle 25", "sample a"]);
    expect(resumed.steps[2].setPointC).toBe(25);
  });

  test("from the cycle, begins the same cycle anew", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 9 });
    const parked = goOn(world, cursor, 10);
    const resumed = goOn(world, to(parked.cursor, { kind: "resume", from: "cycle" }), 6);
    expect(resumed.told).toEqual(["reference air", "fill a", "sample a", "drain", "dry", "reference air"]);
    expect(resumed.cycles).toEqual([2, 2, 2, 2, 2, 3]);
  });
});

describe("going on without parking", () => {
  test("here goes on after the step that was done", () => {
    expect(goOn(...entries(send({ kind: "resume", from: "here" }, { at: 4 })), 2).told).toEqual(["drain", "dry"]);
  });

  test("from the phase measures it again, and does not fill twice", () => {
    expect(goOn(...entries(send({ kind: "resume", from: "phase" }, { at: 4 })), 2).told).toEqual(["sample a", "drain"]);
    expect(goOn(...entries(send({ kind: "resume", from: "phase" }, { at: 3 })), 2).told).toEqual(["sample a", "drain"]);
  });

  test("from the cycle empties the cell first, if it began empty", () => {
    const resumed = goOn(...entries(send({ kind: "resume", from: "cycle" }, { at: 9 })), 3);
    expect(resumed.told).toEqual(["drain", "reference air", "fill a"]);
    expect(resumed.cycles).toEqual([2, 2, 2]);
  });

  test("is refused from a cycle where there is none, and altogether at the end", () => {
    const world = new TestWorld(0);
    const { cursor } = drive(definition, world, { limit: 1 });
    expect(redirect(definition, cursor, { kind: "resume", from: "cycle" })).toHaveProperty("impossible");
    const { cursor: end } = drive(definition, new TestWorld(0));
    expect(redirect(definition, end, { kind: "park" })).toHaveProperty("impossible");
  });
});

describe("a new mount", () => {
  test("is measured in air first, the liquid out and in again, then the phase anew", () => {
    const sent = goOn(...entries(send({ kind: "reference", from: "phase" }, { at: 4 })), 5);
    expect(sent.told).toEqual(["drain", "reference air", "fill a", "sample a", "drain"]);
    expect(sent.steps.map(({ detour }) => detour)).toEqual(["restore", "reference", "restore", undefined, undefined]);
  });

  test("before the next fill needs no restoring", () => {
    expect(goOn(...entries(send({ kind: "reference", from: "phase" }, { at: 6 })), 3).told).toEqual(["reference air", "reference air", "fill a"]);
  });

  test("from the cycle begins it anew after the reference", () => {
    const sent = goOn(...entries(send({ kind: "reference", from: "cycle" }, { at: 9 })), 4);
    expect(sent.told).toEqual(["drain", "reference air", "reference air", "fill a"]);
  });

  test("after being set aside, parked, finds set-point, reference and liquid again", () => {
    const { world, cursor } = send({ kind: "park" }, { at: 9 });
    const parked = goOn(world, cursor, 10);
    const back = goOn(world, to(parked.cursor, { kind: "reference", from: "phase" }), 4);
    expect(back.told).toEqual(["reference air", "fill a", "sample a", "drain"]);
  });

  test("is not forgotten when a person lets the campaign go on before it came", () => {
    const { world, cursor } = send({ kind: "reference", from: "phase" }, { at: 4 });
    expect(goOn(world, to(cursor, { kind: "resume", from: "here" }), 3).told).toEqual(["drain", "reference air", "fill a"]);
  });

  test("takes another reference where the one known is gone from the version", () => {
    const { world, cursor } = send({ kind: "reference", from: "phase" }, { at: 6 });
    const given = { ...definition, blocks: [...definition.blocks, ...define([measure("air", { id: "other" })]).blocks] };
    const gone = { ...cursor, reference: { measureId: "gone", medium: "air", setPointC: 25 } };
    expect(goOn(world, gone, 1, given).steps).toMatchObject([{ blockId: "air", detour: "reference" }]);
  });

  test("before anything was measured changes nothing", () => {
    expect(goOn(...entries(send({ kind: "reference", from: "phase" }, { at: 0 })), 2).told).toEqual(["settle 25", "reference air"]);
  });
});

describe("cleaning again", () => {
  const cleanAgain: Redirection = { kind: "cleanAgain", limitId: "back", maxTimes: 2 };

  test("comes with the reference at the phase boundary, in the cycle it belongs to, then the main line goes on", () => {
    const cleaned = goOn(...entries(send(cleanAgain, { at: 2 })), 5);
    expect(cleaned.told).toEqual(["rinse s", "dry", "reference air", "fill a", "sample a"]);
    expect(cleaned.steps.map(({ detour }) => detour)).toEqual(["cleanAgain", "cleanAgain", "cleanAgain", undefined, undefined]);
    expect(cleaned.steps.map(({ sequence }) => sequence)).toEqual([3, 4, 5, 6, 7]);
  });

  test("asked for between phases waits until the next one closes", () => {
    expect(goOn(...entries(send(cleanAgain, { at: 3 })), 4).told).toEqual(["sample a", "rinse s", "dry", "reference air"]);
  });

  test("fills again where the main line goes on measuring the liquid", () => {
    const given = define([measure("air"), fill("a"), measure("a"), measure("a"), drain], { cleaning: [drain, dry] });
    expect(goOn(...entries(send(cleanAgain, { at: 3, given })), 9, given).told).toEqual(["drain", "dry", "reference air", "fill a", "sample a", "drain"]);
  });

  test("is done at most so many times while the limit stays broken, then holds; going on here forgets it", () => {
    const { world, cursor } = send(cleanAgain, { at: 2 });
    const once = goOn(world, cursor, 3);
    const twice = goOn(world, to(once.cursor, cleanAgain), 3);
    expect(twice.told).toEqual(["rinse s", "dry", "reference air"]);
    const tooOften = goOn(world, to(twice.cursor, cleanAgain), 3);
    expect(tooOften.told).toEqual([]);
    expect(tooOften.action).toEqual({ do: "hold", reason: "limit", text: "Cleaning again 2 times did not bring it back within the limit." });

    const after = goOn(world, to(tooOften.cursor, { kind: "resume", from: "here" }), 2);
    expect(after.told).toEqual(["fill a", "sample a"]);
    expect(after.cursor.cleanedAgain).toEqual({});
  });

  test("counts from nought once the limit has been kept in the medium where it was broken", () => {
    const { world, cursor } = send(cleanAgain, { at: 2 });
    const cleaned = goOn(world, cursor, 3);
    expect(cleaned.cursor.cleanedAgain).toEqual({ back: { times: 1, medium: "air" } });
    expect(goOn(world, cleaned.cursor, 1).cursor.cleanedAgain).toEqual({});
  });

  test("counts on through other media", () => {
    const { world, cursor } = send(cleanAgain, { at: 4 });
    const cleaned = goOn(world, cursor, 7);
    expect(cleaned.told).toEqual(["rinse s", "dry", "reference air", "drain", "dry", "reference air", "fill a"]);
    expect(cleaned.cursor.cleanedAgain).toEqual({ back: { times: 1, medium: "a" } });
  });

  test("at the last phase comes before the end", () => {
    const given = define([measure("air")], { cleaning: [dry] });
    const { told, action } = goOn(...entries(send(cleanAgain, { at: 1, given })), 9, given);
    expect(told).toEqual(["dry", "reference air"]);
    expect(action.do).toBe("finish");
  });

  test("is refused where the protocol does not say how to clean", () => {
    const given = define([measure("air")]);
    expect(redirect(given, drive(given, new TestWorld(0), { limit: 1 }).cursor, cleanAgain)).toHaveProperty("impossible");
  });
});

function entries({ world, cursor }: { world: TestWorld; cursor: Cursor }): [TestWorld, Cursor] {
  return [world, cursor];
}
