import { describe, expect, test } from "vitest";
import { estimate } from "@/lib/protocol/estimate";
import { problems, type RigForCheck } from "@/lib/protocol/problems";
import type { Definition, DefinitionInput } from "@/lib/protocol/schema";
import { define, drain, dry, fill, measure, settle, sweep } from "./definitions";

type Blocks = DefinitionInput["blocks"];

const rig: RigForCheck = {
  timeZone: "Europe/Berlin",
  abilities: { minHz: 1000, maxHz: 20_000, maxPoints: 1001, maxDriveV: 1, minTemperatureC: 10, maxTemperatureC: 60, ports: 2, kinds: ["measure", "fill", "drain", "dry", "settle", "rinse"] },
};
const sensor = { readout: "velocity" as const, nominalF0Hz: 8000, nominalQ: 500 };
const park: Blocks = [drain];
const good = define([{ kind: "repeat", times: 3, blocks: [measure("air"), fill("a"), measure("a"), drain, dry] }], { park });
const told = (definition: Definition, on?: RigForCheck, by: Parameters<typeof problems>[2] = sensor) =>
  problems(definition, on, by).map(({ path, severity, message }) => `${severity} ${path}: ${message}`);

test("a sound protocol has none", () => {
  expect(told(good, rig)).toEqual([]);
});

describe("the cell", () => {
  test.each<[string, Blocks, string[]]>([
    ["filled over, within a turn", [measure("air"), fill("a"), fill("b"), drain], ["warning blocks.2: The cell still holds a here: drain it first."]],
    ["filled over, from one turn to the next", [measure("air"), { kind: "repeat", times: 2, blocks: [fill("a"), measure("a")] }, drain], ["warning blocks.1.blocks.0: The cell still holds a here: drain it first."]],
    ["filled over, from one slot to the next", [measure("air"), { kind: "forEach", over: { slots: ["a", "b"] }, blocks: [fill("each")] }, drain], ["warning blocks.1.blocks.0: The cell still holds a here: drain it first."]],
    ["measured without its liquid", [measure("air"), measure("a")], ["warning blocks.1: This measures a, but the cell holds air here."]],
    ["measured as air with a liquid in it", [measure("air"), fill("a"), measure("air"), drain], ["warning blocks.2: This measures air, but the cell holds a here."]],
    ["left full at the end", [measure("air"), fill("a")], ["warning blocks: The protocol ends with a in the cell."]],
    ["rinsed with what is filled next", [measure("air"), { kind: "rinse", slot: "a", volumeMl: 5, times: 2 }, fill("a"), drain], []],
  ])("%s", (_, blocks, expected) => {
    expect(told(define(blocks, { park }))).toEqual(expected);
  });

  test("with nothing said about parking", () => {
    expect(told(define([measure("air"), fill("a"), drain]))).toEqual(["warning park: Nothing says how to park: a campaign that is stopped leaves its liquid in the cell."]);
  });
});

describe("references", () => {
  test("missing before a sample, before a check, and for a limit", () => {
    const definition = define(
      [fill("a"), measure("a"), drain, { kind: "untilClean", blocks: [dry], measure: measure("air"), tolerancePpm: 10, maxTimes: 2, otherwise: "hold" }],
      { park, limits: [{ kind: "return", does: ["mail"], tolerancePpm: 10 }] },
    );
    expect(told(definition)).toEqual([
      "warning blocks.1: Nothing has been measured as a reference before this sample.",
      "warning blocks.3: There is no reference yet to compare with here, so one turn passes unjudged.",
      "warning limits.0: There is no reference in the protocol that could return.",
    ]);
  });
});

describe("names that lead nowhere", () => {
  test("a limit on a medium that is never measured, a list that nobody uses", () => {
    const definition = define([measure("air"), { kind: "forEach", over: { temperaturesC: [20, 30] }, blocks: [measure("air")] }], {
      limits: [{ kind: "fit", does: ["mail"], sharePercent: 10, medium: "watre" }],
    });
    expect(told(definition)).toEqual([
      "warning limits.0.medium: The protocol never names watre, so this limit is never judged.",
      "warning blocks.1: Nothing in it uses each of its temperatures.",
    ]);
  });
});

describe("for a rig", () => {
  test("what it cannot reach or do", () => {
    const definition = define(
      [
        measure("air", { sweep: { ...sweep, points: 2001, driveV: 2 } }),
        measure("air", { sweep: { ...sweep, centre: 30_000 } }),
        settle(5),
        { kind: "forEach", over: { temperaturesC: [20, 80] }, blocks: [settle("each")] },
        { kind: "rinse", slot: "s", volumeMl: 5, times: 1 },
        dry,
      ],
      { park },
    );
    const small = { ...rig, abilities: { ...rig.abilities, kinds: ["measure", "fill", "drain", "dry", "settle"] } };
    expect(told(definition, small)).toEqual([
      "error blocks.0.sweep.points: The rig sweeps at most 1001 points.",
      "error blocks.0.sweep.driveV: The rig drives with at most 1 V.",
      "error blocks.1.sweep.centre: The centre lies outside the rig's range of 1000 to 20000 Hz.",
      "error blocks.2.temperatureC: The rig goes down to 10 °C only.",
      "error blocks.3.over.temperaturesC.1: The rig goes up to 60 °C only.",
      "error blocks.4: The rig cannot rinse.",
    ]);
  });

  test("too few ports", () => {
    const definition = define([measure("air"), { kind: "forEach", over: { slots: ["a", "b", "c"] }, blocks: [fill("each"), drain] }], { park });
    expect(told(definition, rig)).toEqual(["error blocks: The protocol uses 3 slots (a, b, c), the rig has 2 ports."]);
  });

  test("a sensor or a search out of its range", () => {
    expect(told(good, rig, { ...sensor, nominalF0Hz: 30_000 })).toEqual(["error blocks: The sensor's resonance at 30000 Hz lies outside the rig's range of 1000 to 20000 Hz."]);
    expect(told({ ...good, search: { fromHz: 100, toHz: 900, points: 401 } }, rig)).toEqual(["error search: The search lies outside the rig's range of 1000 to 20000 Hz."]);
  });

  test("waste that does not fit, and nothing to do at all", () => {
    const world = { nowMs: 0, timeZone: "UTC", abilities: rig.abilities, nominal: { f0Hz: 8000, q: 500 } };
    expect(problems(good, { ...rig, wasteCapacityMl: 50 }, sensor, estimate(good, world))).toEqual([
      { path: "blocks", severity: "warning", message: "About 120 mL of waste do not fit into the container of 50 mL: it has to be emptied 2 times on the way." },
    ]);
    const over = define([{ kind: "repeat", until: "1969-01-01", blocks: [measure("air")] }]);
    expect(problems(over, rig, sensor, estimate(over, world))).toEqual([{ path: "blocks", severity: "error", message: "There is nothing to do: every date is over." }]);
  });
});

test("a readout other than the sensor's is told, the protocol's counts", () => {
  expect(told(good, rig, { ...sensor, readout: undefined })).toEqual([]);
  expect(problems(good, rig, { ...sensor, readout: "displacement" })).toMatchObject([{ path: "readout", severity: "warning" }]);
});
