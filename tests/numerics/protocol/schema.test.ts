import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { parseDefinition } from "@/lib/protocol/schema";
import { anyDefinition, idsOf, sweep } from "./definitions";

type Json = Record<string, unknown>;

const air: Json = { kind: "measure", medium: "air", repeats: 10, sweep };
const clean: Json = { kind: "untilClean", blocks: [{ kind: "drain" }], measure: air, tolerancePpm: 10, maxTimes: 3, otherwise: "hold" };
const wrap = (block: unknown, depth: number): unknown => (depth === 0 ? block : { kind: "repeat", times: 2, blocks: [wrap(block, depth - 1)] });

function parse(given: Json) {
  let made = 0;
  return parseDefinition({ name: "Test", readout: "velocity", blocks: [air], ...given }, () => `made${made++}`);
}

function errorsOf(given: Json): string[] {
  const parsed = parse(given);
  return parsed.ok ? [] : parsed.errors.map(({ path, message }) => `${path}: ${message}`);
}

describe("a definition", () => {
  test("gets the defaults and the ids that it leaves out, and the role that its medium suggests", () => {
    const parsed = parse({ blocks: [air, { ...air, medium: "water" }, clean], limits: [{ kind: "fit", does: ["mail"], sharePercent: 20 }] });
    expect(parsed).toMatchObject({
      ok: true,
      definition: {
        baseline: { airReferences: 3 },
        maxAttempts: 3,
        blocks: [
          { id: "made0", role: "reference", discard: 0, pauseS: 0 },
          { id: "made1", role: "sample" },
          { id: "made2", measure: { id: "made4", role: "check" }, blocks: [{ id: "made3" }] },
        ],
        limits: [{ id: "made5", clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }],
      },
    });
  });

  test("keeps the ids it has, and makes none that is taken", () => {
    let asked = 0;
    const blocks = [{ kind: "drain" }, { kind: "drain", id: "made0" }];
    const parsed = parseDefinition({ name: "Test", readout: "velocity", blocks }, () => `made${asked++}`);
    expect(parsed).toMatchObject({ definition: { blocks: [{ id: "made1" }, { id: "made0" }] } });
  });

  test("that has been completed is the same after another round", () => {
    fc.assert(
      fc.property(anyDefinition({ startMs: 0 }), (definition) => {
        const again = parseDefinition(JSON.parse(JSON.stringify(definition)), () => "unused");
        expect(again).toEqual({ ok: true, definition });
        expect(new Set(idsOf(definition.blocks)).size).toBe(idsOf(definition.blocks).length);
      }),
      { numRuns: 50 },
    );
  });

  test("may use each inside the fitting forEach, through other blocks between", () => {
    const blocks = [
      { kind: "forEach", over: { temperaturesC: [20, 30] }, blocks: [{ kind: "settle", temperatureC: "each", toleranceC: 0.1, holdS: 60, timeoutS: 600 }, { kind: "forEach", over: { slots: ["a", "b"] }, blocks: [wrap({ kind: "fill", slot: "each", volumeMl: 1, flowMlPerMin: 1 }, 2)] }] },
    ];
    expect(errorsOf({ blocks })).toEqual([]);
  });

  test("may nest eight deep", () => {
    expect(errorsOf({ blocks: [wrap(air, 7)] })).toEqual([]);
  });
});

describe("a mistake is named with its path and a sentence", () => {
  const fill = { kind: "fill", slot: "a", volumeMl: 1, flowMlPerMin: 1 };
  const settle = { kind: "settle", temperatureC: 20, toleranceC: 0.1, holdS: 60, timeoutS: 600 };
  const limit = { does: ["mail"] };

  test.each<[string, Json, string | RegExp]>([
    ["a misspelt field", { bloks: [] }, /^: Unrecognized key: "bloks"/],
    ["a misspelt field of a block", { blocks: [{ ...fill, volume: 3 }] }, /^blocks\.0: Unrecognized key: "volume"/],
    ["an unknown kind", { blocks: [{ kind: "boil" }] }, /^blocks\.0\.kind: /],
    ["no block", { blocks: [] }, "blocks: A protocol needs at least one block"],
    ["an empty loop", { blocks: [{ kind: "repeat", times: 2, blocks: [] }] }, "blocks.0.blocks: A block that holds blocks needs at least one"],
    ["an id twice", { blocks: [{ ...air, id: "x" }, { kind: "repeat", times: 2, blocks: [{ ...fill, id: "x" }] }] }, "blocks.1.blocks.0.id: The id x is taken by blocks.0"],
    ["an id twice, in the check", { blocks: [{ ...clean, id: "x", measure: { ...air, id: "x" } }] }, "blocks.0.measure.id: The id x is taken by blocks.0"],
    ["an id of a limit twice", { limits: [{ ...limit, id: "x", kind: "silence", afterS: 60 }, { ...limit, id: "x", kind: "count", failedSteps: 3 }] }, "limits.1.id: The id x is taken by limits.0"],
    ["nine levels", { blocks: [wrap(air, 8)] }, /Blocks are nested at most 8 deep$/],
    ["each outside a forEach", { blocks: [{ ...fill, slot: "each" }] }, "blocks.0.slot: each stands only inside a forEach over slots"],
    ["each in a forEach of the other type", { blocks: [{ kind: "forEach", over: { temperaturesC: [20] }, blocks: [{ ...air, medium: "each" }] }] }, "blocks.0.blocks.0.medium: each stands only inside a forEach over slots"],
    ["each as a temperature outside", { blocks: [{ ...settle, temperatureC: "each" }] }, "blocks.0.temperatureC: each stands only inside a forEach over temperatures"],
    ["each in the cleaning", { cleaning: [{ ...fill, slot: "each" }] }, "cleaning.0.slot: each stands only inside a forEach over slots"],
    ["air as a slot to fill", { blocks: [{ ...fill, slot: "air" }] }, "blocks.0.slot: air is no slot name"],
    ["air in a list of slots", { blocks: [{ kind: "forEach", over: { slots: ["a", "air"] }, blocks: [air] }] }, "blocks.0.over.slots.1: air and each are no slot names"],
    ["times and until", { blocks: [{ kind: "repeat", times: 2, until: "2026-01-01", blocks: [air] }] }, "blocks.0.times: A repeat has either times or until"],
    ["neither of them", { blocks: [{ kind: "repeat", blocks: [air] }] }, "blocks.0.times: A repeat has either times or until"],
    ["a date that does not exist", { blocks: [{ kind: "repeat", until: "2026-02-30", blocks: [air] }] }, "blocks.0.until: A date is written YYYY-MM-DD"],
    ["a wait for two things", { blocks: [{ kind: "wait", seconds: 5, until: { time: "08:00" } }] }, "blocks.0.seconds: A wait has either seconds or until"],
    ["a time that does not exist", { blocks: [{ kind: "wait", until: { time: "24:00" } }] }, "blocks.0.until.time: A time is written HH:MM, from 00:00 to 23:59"],
    ["nothing left after discarding", { blocks: [{ ...air, discard: 10 }] }, "blocks.0.discard: At least one repeat has to be left after discarding"],
    ["too few points", { blocks: [{ ...air, sweep: { ...sweep, points: 10 } }] }, /^blocks\.0\.sweep\.points: /],
    ["a span of both kinds", { blocks: [{ ...air, sweep: { ...sweep, span: { hz: 1, halfWidths: 2 } } }] }, "blocks.0.sweep.span: The span has either halfWidths or hz"],
    ["a check in a liquid", { blocks: [{ ...clean, measure: { ...air, medium: "a" } }] }, "blocks.0.measure.medium: Cleanness is checked in air"],
    ["a check that is a reference", { blocks: [{ ...clean, measure: { ...air, role: "reference" } }] }, "blocks.0.measure.role: The measurement of untilClean is a check"],
    ["a time-out within the hold", { blocks: [{ ...settle, timeoutS: 60 }] }, "blocks.0.timeoutS: The time-out has to be longer than the time to hold"],
    ["too long a baseline", { baseline: { airReferences: 21 } }, /^baseline\.airReferences: /],
    ["cleaning again without cleaning", { limits: [{ does: ["cleanAgain"], kind: "return", tolerancePpm: 5 }] }, "limits.0.does: cleanAgain needs the protocol to say how to clean (cleaning)"],
    ["parking after a time without park", { parkAfterS: 60 }, "parkAfterS: parkAfterS needs the protocol to say how to park (park)"],
    ["a return without tolerance", { limits: [{ ...limit, kind: "return" }] }, "limits.0.tolerancePpm: A return limit needs tolerancePpm, toleranceQPercent or both"],
    ["a drift without slope", { limits: [{ ...limit, kind: "drift", quantity: "f0" }] }, "limits.0.ppmPerDay: A drift limit needs ppmPerDay, or crossesPpm with withinDays"],
    ["a drift of both kinds", { limits: [{ ...limit, kind: "drift", quantity: "f0", ppmPerDay: 1, withinDays: 3 }] }, "limits.0.ppmPerDay: A drift limit has either ppmPerDay, or crossesPpm with withinDays"],
    ["a crossing without days", { limits: [{ ...limit, kind: "drift", quantity: "f0", crossesPpm: 1 }] }, "limits.0.withinDays: crossesPpm needs withinDays"],
    ["a temperature band upside down", { limits: [{ ...limit, kind: "temperature", minC: 30, maxC: 20 }] }, "limits.0.maxC: maxC has to lie above minC"],
    ["a limit that does nothing", { limits: [{ does: [], kind: "silence", afterS: 60 }] }, "limits.0.does: A limit does at least one thing"],
    ["a search upside down", { search: { fromHz: 9000, toHz: 3000, points: 401 } }, "search.toHz: toHz has to lie above fromHz"],
  ])("%s", (_, given, expected) => {
    const errors = errorsOf(given);
    if (typeof expected === "string") expect(errors).toEqual([expected]);
    else expect(errors).toEqual([expect.stringMatching(expected)]);
  });

  test("several at once", () => {
    expect(errorsOf({ name: "", blocks: [{ kind: "boil" }] })).toHaveLength(2);
  });

  test("also where the nesting was made to exhaust the stack", () => {
    expect(errorsOf({ blocks: [wrap(air, 5000)] })).toEqual(["blocks: Blocks are nested too deep"]);
  });

  test.each([[null], [[]], ["text"], [7]])("no object at all: %s", (input) => {
    expect(parseDefinition(input, () => "id")).toMatchObject({ ok: false });
  });
});
