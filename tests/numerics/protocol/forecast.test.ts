import { describe, expect, test } from "vitest";
import { redirect, start } from "@/lib/protocol/interpreter";
import { forecast } from "@/lib/protocol/forecast";
import type { World } from "@/lib/protocol/made-up-world";
import type { Cursor } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure, sweep } from "./definitions";
import { brief, drive } from "./drive";
import { TestWorld } from "./test-world";

const world: World = {
  nowMs: 0,
  timeZone: "UTC",
  abilities: { minHz: 100, maxHz: 100_000, maxPoints: 4001, maxDriveV: 1 },
  nominal: { f0Hz: 8000, q: 500 },
};
const definition = define(
  [{ kind: "repeat", times: 1000, blocks: [measure("air"), fill("a"), measure("a"), drain, dry] }],
  { park: [drain] },
);

describe("what is planned", () => {
  test("are the steps that will come, one after the other in time", () => {
    const { cursor } = drive(definition, new TestWorld(0), { limit: 7 });
    const segments = forecast(definition, cursor, world, 6);
    const { steps } = drive(definition, new TestWorld(0), { limit: 13 });
    expect(segments.map(({ sequence, kind, cycle }) => [sequence, kind, cycle])).toEqual(
      steps.slice(7).map(({ sequence, kind, cycle }) => [sequence, kind, cycle]),
    );
    expect(segments[0].startS).toBe(0);
    for (const [index, { startS }] of segments.slice(1).entries())
      expect(startS).toBeCloseTo(segments[index].startS + segments[index].durationS, 9);
  });

  test("ends with the protocol", () => {
    expect(forecast(define([fill("a"), drain]), start(definition), world, 100).map(({ kind, slot }) => [kind, slot])).toEqual([
      ["fill", "a"],
      ["drain", undefined],
    ]);
  });

  test("searches only where there is no track yet", () => {
    const tracked = define([measure("air", { sweep })]);
    const roles = (tracks: World["tracks"]) => forecast(tracked, start(tracked), { ...world, tracks }, 9).map(({ role }) => role);
    expect(roles({})).toEqual(["find", "reference"]);
    expect(roles({ "air|": { f0Hz: 8000, q: 500 } })).toEqual(["reference"]);
  });

  test("of a parked campaign begins with what brings it back", () => {
    const world1 = new TestWorld(0);
    const { cursor } = drive(definition, world1, { limit: 3 });
    const parked = drive(definition, world1, { from: redirect(definition, cursor, { kind: "park" }) as Cursor });
    expect(brief(parked.steps)).toEqual(["drain"]);
    expect(forecast(definition, parked.cursor, world, 3).map(({ kind }) => kind)).toEqual(["fill", "measure", "drain"]);
  });
});
