import { describe, expect, test } from "vitest";
import type { Block, Definition } from "@/lib/protocol/schema";
import { changedFields, compareDefinitions } from "@/lib/protocols/compare";
import { aDefinition } from "./definition";

const drain = (id: string): Block => ({ id, kind: "drain" });
const withBlocks = (...blocks: Block[]): Definition => aDefinition({ blocks });
const compared = (one: Definition, other: Definition) => Object.fromEntries([...compareDefinitions(one, other)].map(([id, difference]) => [id, difference.kind === "changed" ? [...difference.fields].join() : difference.kind]));

describe("compareDefinitions", () => {
  test("nothing differs from itself", () => {
    expect(compared(aDefinition(), aDefinition())).toEqual({});
  });

  test("a changed value is named by its path, only in its own block", () => {
    const other = structuredClone(aDefinition());
    const [loop] = other.blocks;
    if (loop.kind !== "repeat" || loop.blocks[0].kind !== "measure") throw new Error("the fixture begins with a repeat of a measure");
    loop.times = 4;
    loop.blocks[0].sweep = { ...loop.blocks[0].sweep, driveV: 0.2, span: { hz: 30 } };
    expect(compared(aDefinition(), other)).toEqual({ cycles: "times", air: "sweep.span.halfWidths,sweep.span.hz,sweep.driveV" });
  });

  test("what only one has stands on its side, and neighbours that moved up for it do not", () => {
    const [one, other] = [withBlocks(drain("a"), drain("b"), drain("c")), withBlocks(drain("n"), drain("b"), drain("c"))];
    expect(compared(one, other)).toEqual({ a: "onlyHere" });
    expect(compared(other, one)).toEqual({ n: "onlyHere" });
  });

  test("of blocks in another order the fewest are moved", () => {
    expect(compared(withBlocks(drain("a"), drain("b"), drain("c"), drain("d")), withBlocks(drain("b"), drain("c"), drain("d"), drain("a")))).toEqual({ a: "moved" });
  });

  test("a block in another container is moved", () => {
    const loop = (...blocks: Block[]): Block => ({ id: "r", kind: "repeat", times: 2, blocks });
    expect(compared(withBlocks(drain("a"), loop(drain("b"))), withBlocks(loop(drain("a"), drain("b"))))).toEqual({ a: "moved" });
  });

  test("the check of a cleaning stays in its place", () => {
    const { sweep } = aDefinition().blocks.flatMap((block) => ("blocks" in block ? block.blocks : [])).find((block) => block.kind === "measure") ?? {};
    if (!sweep) throw new Error("the fixture measures");
    const clean = (...blocks: Block[]): Block => ({
      id: "u", kind: "untilClean", blocks, tolerancePpm: 10, maxTimes: 2, otherwise: "hold",
      measure: { id: "check", kind: "measure", medium: "air", role: "check", repeats: 3, discard: 0, pauseS: 0, sweep },
    });
    expect(compared(withBlocks(clean(drain("a"), drain("b"))), withBlocks(clean(drain("a"), drain("b"))))).toEqual({});
  });

  test("limits are compared by id", () => {
    const limit = { id: "l", kind: "silence", does: ["mail"], afterS: 60, clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 } as const;
    const of = (...limits: Definition["limits"]) => aDefinition({ limits });
    expect(compared(of({ ...limit, does: ["mail"] }), of({ ...limit, does: ["mail", "hold"], afterS: 90 }))).toEqual({ l: "does,afterS" });
  });
});

test("changedFields takes a missing value for a difference, and the order of keys for none", () => {
  expect([...changedFields({ a: 1, b: { c: 1, d: 2 } }, { b: { d: 2, c: 1 } })]).toEqual(["a"]);
});
