import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { next, start } from "@/lib/protocol/interpreter";
import type { Cursor, Facts } from "@/lib/protocol/types";
import { anyDefinition } from "./definitions";
import { drive, isStep, stored, trace } from "./drive";
import { expand, traceOf } from "./oracle";
import { type Story, TestWorld } from "./test-world";

const startMs = Date.UTC(2026, 2, 10, 9);
const LIMIT = 250;

const anyStory: fc.Arbitrary<Story> = fc.record({
  dirty: fc.array(fc.boolean(), { minLength: 1, maxLength: 7 }),
  unusable: fc.array(fc.oneof({ weight: 5, arbitrary: fc.constant(false) }, { weight: 1, arbitrary: fc.constant(true) }), {
    minLength: 1,
    maxLength: 7,
  }),
});

describe("any protocol", () => {
  test("gives exactly the steps of its plain reading, in order, none skipped or repeated, and ends as it does", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs }), anyStory, (definition, story) => {
        const expected = expand(definition, new TestWorld(startMs, story), LIMIT);
        expect(trace(definition, new TestWorld(startMs, story), LIMIT)).toEqual(expected);
      }),
      { numRuns: 400 },
    );
  }, 30_000);

  test("numbers its steps one after the other", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs }), anyStory, (definition, story) => {
        const { steps } = drive(definition, new TestWorld(startMs, story), { limit: LIMIT });
        expect(steps.map(({ sequence }) => sequence)).toEqual(steps.map((_, index) => index + 1));
      }),
      { numRuns: 100 },
    );
  }, 30_000);

  test("goes on alike from any cursor that a database has kept, and answers a repeated question alike", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs }), anyStory, fc.nat(LIMIT), (definition, story, cut) => {
        const whole = drive(definition, new TestWorld(startMs, story), { limit: LIMIT });
        const world = new TestWorld(startMs, story);
        const first = drive(definition, world, { limit: cut });
        const rest = drive(definition, world, { from: stored(first.cursor), limit: LIMIT - first.steps.length });
        expect([...first.steps, ...rest.steps].map(traceOf)).toEqual(whole.steps.map(traceOf));

        const asked = deepFrozen<[Cursor, Facts]>([stored(first.cursor), stored(world.facts)]);
        expect(next(definition, ...asked)).toEqual(next(definition, ...asked));
      }),
      { numRuns: 100 },
    );
  }, 30_000);

  test("once finished stays finished", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs }), (definition) => {
        const world = new TestWorld(startMs);
        const { action, cursor } = drive(definition, world, { limit: LIMIT });
        fc.pre(action.do === "finish");
        expect(next(definition, cursor, world.facts)).toEqual({ cursor, action: { do: "finish" } });
      }),
      { numRuns: 100 },
    );
  }, 30_000);

  test("begins with a cursor that needs nothing of the definition", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs }), (definition) => {
        const { action } = next(definition, start(definition), new TestWorld(startMs).facts);
        expect(isStep(action) ? action.step.sequence : action.do).toSatisfy((first) => first === 1 || first === "finish");
      }),
      { numRuns: 100 },
    );
  }, 30_000);
});

function deepFrozen<T>(value: T): T {
  if (typeof value === "object" && value !== null) {
    for (const part of Object.values(value)) deepFrozen(part);
    Object.freeze(value);
  }
  return value;
}
