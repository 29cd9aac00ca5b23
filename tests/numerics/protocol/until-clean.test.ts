import { describe, expect, test } from "vitest";
import { next, redirect } from "@/lib/protocol/interpreter";
import type { DefinitionInput } from "@/lib/protocol/schema";
import type { Cursor } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure } from "./definitions";
import { brief, drive } from "./drive";
import { f0Hz, q, TestWorld } from "./test-world";

type UntilClean = Extract<DefinitionInput["blocks"][number], { kind: "untilClean" }>;

const untilClean = (more: Partial<UntilClean> = {}): UntilClean => ({
  kind: "untilClean",
  blocks: [dry],
  measure: measure("air"),
  tolerancePpm: 20,
  maxTimes: 3,
  otherwise: "hold",
  ...more,
});
const withReference = (more?: Partial<UntilClean>) => define([measure("air"), untilClean(more), fill("a")]);

/** The first phase is the reference; the checks follow. */
const worldWith = (...dirty: boolean[]) => new TestWorld(0, { dirty: [false, ...dirty], unusable: [false] });

describe("cleaning until the air reference is back", () => {
  test("goes on after the first turn that is within tolerance", () => {
    expect(brief(drive(withReference(), worldWith(false)).steps)).toEqual(["reference air", "dry", "check air", "fill a"]);
    expect(brief(drive(withReference(), worldWith(true, true, false)).steps)).toEqual([
      "reference air",
      ...["dry", "check air", "dry", "check air", "dry", "check air"],
      "fill a",
    ]);
  });

  test("lets one turn pass while there is no reference", () => {
    const { steps } = drive(define([untilClean(), fill("a")]), new TestWorld(0, { dirty: [true], unusable: [false] }));
    expect(brief(steps)).toEqual(["dry", "check air", "fill a"]);
  });

  test("holds, goes on or stops after its last turn, as the protocol says", () => {
    const held = drive(withReference(), worldWith(true, true, true));
    expect(held.action).toEqual({
      do: "hold",
      reason: "limit",
      text: "Cleaning 3 times did not bring the air reference back within 20 ppm: f0 is -50.0 ppm off.",
    });
    expect(held.steps).toHaveLength(7);

    const gone = drive(withReference({ otherwise: "continue" }), worldWith(true, true, true));
    expect(brief(gone.steps).slice(-2)).toEqual(["check air", "fill a"]);
    expect(gone.action.do).toBe("finish");

    expect(drive(withReference({ otherwise: "stop" }), worldWith(true, true, true)).action.do).toBe("stop");
  });

  test.each([
    ["f0 just inside", { f0Hz: f0Hz * (1 + 19.999e-6), q }, undefined, true],
    ["f0 just outside, on the other side", { f0Hz: f0Hz * (1 + 20.001e-6), q }, undefined, false],
    ["Q outside, where it is judged", { f0Hz, q: q * 0.97 }, 2, false],
    ["Q outside, where it is not", { f0Hz, q: q * 0.97 }, undefined, true],
    ["Q inside", { f0Hz, q: q * 0.985 }, 2, true],
    ["nothing that counts", {}, undefined, false],
  ])("judges by the baseline, also an incomplete one: %s", (_, found, toleranceQPercent, isClean) => {
    const definition = withReference({ ...(toleranceQPercent && { toleranceQPercent }) });
    const world = worldWith(false);
    const { cursor } = drive(definition, world, { limit: 3 });
    world.facts.last = { outcome: "done", phase: { ...found, n: 4, nUsed: 4, unusable: 0 } };
    const { action } = next(definition, cursor, world.facts);
    expect(action).toMatchObject({ step: { kind: isClean ? "fill" : "dry" } });
  });

  test("held, goes on where it stands by a person's word, or checks once more from the phase", () => {
    const definition = withReference();
    const world = worldWith(true, true, true, false);
    const { cursor } = drive(definition, world);
    const here = redirect(definition, cursor, { kind: "resume", from: "here" }) as Cursor;
    expect(next(definition, here, world.facts).action).toMatchObject({ step: { sequence: 8, kind: "fill" } });

    const phase = redirect(definition, cursor, { kind: "resume", from: "phase" }) as Cursor;
    expect(brief(drive(definition, world, { from: phase }).steps)).toEqual(["check air", "fill a"]);
  });

  test("held, asked again without a person's word, holds again", () => {
    const definition = withReference();
    const world = worldWith(true, true, true);
    const { cursor, action } = drive(definition, world);
    expect(next(definition, cursor, world.facts)).toEqual({ cursor, action });
  });

  test("runs again in each turn of a loop around it", () => {
    const definition = define([measure("air"), { kind: "repeat", times: 2, blocks: [fill("a"), drain, untilClean({ maxTimes: 2, otherwise: "continue" })] }]);
    expect(brief(drive(definition, worldWith(true, true, false)).steps)).toEqual([
      "reference air",
      ...["fill a", "drain", "dry", "check air", "dry", "check air"],
      ...["fill a", "drain", "dry", "check air"],
    ]);
  });
});
