import { describe, expect, test } from "vitest";
import { slotsOf } from "@/lib/campaigns/slots-of";
import { traceLiquids } from "@/lib/campaigns/trace-liquids";
import { parseDefinition, type Definition, type DefinitionInput } from "@/lib/protocol/schema";

let made = 0;

function definition(blocks: DefinitionInput["blocks"], more: Partial<DefinitionInput> = {}): Definition {
  const parsed = parseDefinition({ name: "P", readout: "velocity", blocks, ...more }, () => `b${++made}`);
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.errors));
  return parsed.definition;
}

const fill = (slot: string) => ({ kind: "fill" as const, slot, volumeMl: 10, flowMlPerMin: 5 });
const rinse = (slot: string) => ({ kind: "rinse" as const, slot, volumeMl: 10, times: 1 });
const drain = { kind: "drain" as const };
const dry = { kind: "dry" as const, seconds: 60 };
const settle = (temperatureC: number | "each") => ({ kind: "settle" as const, temperatureC, toleranceC: 0.1, holdS: 60, timeoutS: 3600 });
const pairs = (given: Definition) => traceLiquids(given).followed.map(({ before, after }) => `${before}→${after}`);

describe("the hottest a liquid gets", () => {
  test("counts a set-point that was set before it came in, and one set while it is in", () => {
    const { hottestC } = traceLiquids(definition([settle(30), fill("a"), settle(40), drain, settle(90), fill("b")]));
    expect(hottestC.get("a")).toBe(40);
    expect(hottestC.get("b")).toBe(90);
  });

  test("says nothing before any set-point", () => {
    expect(traceLiquids(definition([fill("a")])).hottestC.size).toBe(0);
  });

  test("takes the highest of a forEach, also what the turn before leaves set", () => {
    const { hottestC } = traceLiquids(definition([{ kind: "forEach", over: { temperaturesC: [20, 45, 30] }, blocks: [fill("a"), settle("each"), drain, fill("b"), drain] }]));
    expect(hottestC.get("a")).toBe(45);
    expect(hottestC.get("b")).toBe(45);
  });

  test("a drained cell may be heated", () => {
    expect(traceLiquids(definition([settle(20), fill("a"), drain, settle(80)])).hottestC.get("a")).toBe(20);
  });
});

describe("liquids in a row", () => {
  test("a repeat brings the last before the first, a single turn does not", () => {
    expect(pairs(definition([{ kind: "repeat", times: 2, blocks: [fill("a"), drain, fill("b"), drain] }]))).toEqual(["a→b", "b→a"]);
    expect(pairs(definition([{ kind: "repeat", times: 1, blocks: [fill("a"), drain, fill("b"), drain] }]))).toEqual(["a→b"]);
  });

  test("a rinse between two fills parts them", () => {
    expect(pairs(definition([fill("a"), drain, rinse("c"), fill("b")]))).toEqual(["a→c", "c→b"]);
  });

  test("a forEach over slots goes in its own order and no other", () => {
    const given = definition([{ kind: "forEach", over: { slots: ["a", "b", "c"] }, blocks: [fill("each"), drain] }]);
    expect(pairs(given)).toEqual(["a→b", "b→c"]);
  });

  test("cleaning and parking may come after anything", () => {
    const given = definition([fill("a"), drain, fill("b"), drain], { cleaning: [rinse("c"), dry], park: [drain] });
    expect(pairs(given)).toEqual(expect.arrayContaining(["a→b", "a→c", "b→c"]));
  });
});

test("a residue is dried unless something else was put in after it", () => {
  expect([...traceLiquids(definition([fill("a"), drain, dry])).dried]).toEqual(["a"]);
  expect([...traceLiquids(definition([fill("a"), drain, rinse("c"), dry, dry])).dried]).toEqual(["c"]);
});

test("ten million turns cost what two cost", () => {
  const blocks: DefinitionInput["blocks"] = [
    { kind: "repeat", times: 10_000_000, blocks: [{ kind: "repeat", times: 10_000_000, blocks: [fill("a"), dry, fill("b")] }] },
  ];
  expect(traceLiquids(definition(blocks)).complete).toBe(true);
});

test("loops in loops over hundreds of slots are given up, and said", () => {
  const slots = Array.from({ length: 200 }, (_, n) => `s${n}`);
  const over = (blocks: DefinitionInput["blocks"]): DefinitionInput["blocks"] => [{ kind: "forEach", over: { slots }, blocks }];
  expect(traceLiquids(definition(over(over(over([fill("each")]))))).complete).toBe(false);
});

test("slots are named by the blocks that use them, cleaning included, air and each never", () => {
  const given = definition(
    [{ kind: "forEach", over: { slots: ["b", "a"] }, blocks: [fill("each"), drain] }, fill("c")],
    { cleaning: [rinse("d")] },
  );
  expect(slotsOf(given)).toEqual(["b", "a", "c", "d"]);
});
