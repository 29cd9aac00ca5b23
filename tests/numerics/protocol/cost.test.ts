import { describe, expect, test } from "vitest";
import { next, start } from "@/lib/protocol/interpreter";
import type { Definition } from "@/lib/protocol/schema";
import type { Cursor } from "@/lib/protocol/types";
import { define, drain, fill, measure } from "./definitions";
import { TestWorld } from "./test-world";

/** 4 steps a turn of the inner loop; `turns` in each of three nested loops. */
const nested = (turns: number) =>
  define([
    {
      kind: "repeat",
      id: "outer",
      times: turns,
      blocks: [
        {
          kind: "repeat",
          id: "middle",
          times: turns,
          blocks: [{ kind: "repeat", id: "inner", times: turns, blocks: [measure("air", { id: "air" }), fill("a", "fill"), measure("a", { id: "liquid" }), { ...drain, id: "drain" }] }],
        },
      ],
    },
  ]);

/** Counts what `next` reads of a definition. */
function readsOf(definition: Definition, cursor: Cursor): number {
  const world = new TestWorld(0);
  if (cursor.sequence > 0) world.facts.last = { outcome: "done" };
  let reads = 0;
  const watched = <T extends object>(value: T): T =>
    new Proxy(value, {
      get: (target, key, receiver) => {
        reads++;
        const read: unknown = Reflect.get(target, key, receiver);
        return typeof read === "object" && read !== null ? watched(read) : read;
      },
    });
  next(watched(definition), cursor, world.facts);
  return reads;
}

const cursorAt = (turns: number[], leaf: string): Cursor => ({
  ...start(nested(1)),
  sequence: 1,
  cycle: turns[0] + 1,
  cyclesBegun: turns[0] + 1,
  path: [...["outer", "middle", "inner"].map((id, index) => ({ id, turn: turns[index] })), { id: leaf }],
});

describe("a protocol of 10 million steps costs what one of ten costs", () => {
  const [small, large] = [nested(2), nested(136)];

  test("at its first step", () => {
    expect(readsOf(large, start(large))).toBe(readsOf(small, start(small)));
  });

  test("anywhere within, also where three loops turn at once", () => {
    expect(readsOf(large, cursorAt([100, 57, 99], "fill"))).toBe(readsOf(small, cursorAt([0, 0, 0], "fill")));
    expect(readsOf(large, cursorAt([100, 135, 135], "drain"))).toBe(readsOf(small, cursorAt([0, 1, 1], "drain")));
  });

  test("and at its end", () => {
    expect(readsOf(large, cursorAt([135, 135, 135], "drain"))).toBe(readsOf(small, cursorAt([1, 1, 1], "drain")));
  });
});

test("loops over dates that are past cost one look each, however many turns hold them", () => {
  const past = (times: number) =>
    define([{ kind: "repeat", times, blocks: [{ kind: "repeat", until: "1969-01-01", blocks: [measure("air")] }] }, drain]);
  expect(readsOf(past(100_000_000), start(past(1)))).toBeLessThanOrEqual(readsOf(past(2), start(past(2))));
});
