import { describe, expect, test } from "vitest";
import { todaySentence, type SaidRig } from "@/lib/today/sentence";

const now = "2026-05-14T07:42:00Z";
const rig = (name: string, given: Partial<SaidRig> = {}): SaidRig => ({
  name,
  timeZone: "Europe/Berlin",
  now,
  word: "Measuring",
  silent: false,
  lastContactAt: "2026-05-14T07:41:56Z",
  haltedAt: null,
  takenOnBy: null,
  ...given,
});
const halted = (name: string, given: Partial<SaidRig> = {}) => rig(name, { word: "Halted", haltedAt: "2026-05-14T04:18:00Z", ...given });
const free = (name: string) => rig(name, { word: undefined });
const say = (rigs: SaidRig[], openAlarms = 0) => todaySentence({ rigs, now, openAlarms });

describe("who measures", () => {
  test("none set up", () => expect(say([])).toBe("No rig has been set up yet."));
  test("one by name", () => expect(say([rig("North bench"), free("Loft bench")])).toBe("North bench is measuring."));
  test("all", () => expect(say([rig("A"), rig("B"), rig("C")])).toBe("All three rigs are measuring."));
  test("filling and drying are measuring's other words", () => expect(say([rig("A", { word: "Filling" }), rig("B", { word: "Drying" }), free("C")])).toBe("Two rigs are measuring."));
  test("one free", () => expect(say([free("North bench")])).toBe("North bench is free."));
  test("all free", () => expect(say([free("A"), free("B")])).toBe("Both rigs are free."));
});

describe("who needs a person", () => {
  test("the sentence of the mock", () =>
    expect(say([rig("North bench"), halted("South bench"), rig("Cold room"), rig("Loft bench")])).toBe("Three rigs are measuring. South bench halted at 06:18 and needs a person."));

  test("somebody has it", () => expect(say([rig("A"), halted("South bench", { takenOnBy: "M. Tollan" })])).toBe("A is measuring. South bench halted at 06:18 and M. Tollan has it."));

  test("not today, by the rig's own clock", () =>
    expect(say([rig("A"), halted("South bench", { haltedAt: "2026-05-12T04:18:00Z" })])).toContain("South bench halted on Tue 12 May at 06:18"));

  test("several", () => expect(say([halted("A"), halted("B")])).toBe("No rig is measuring. A and B have halted and need a person."));

  test("many are counted", () => expect(say([halted("A"), halted("B"), halted("C"), halted("D")])).toContain("Four rigs have halted"));

  test("a silent rig does not count as measuring", () =>
    expect(say([rig("A"), rig("Cold room", { silent: true, lastContactAt: "2026-05-14T01:10:00Z" })])).toBe("A is measuring. Nothing has been heard of Cold room since 03:10."));

  test("waiting and paused", () =>
    expect(say([rig("A"), rig("B", { word: "Waiting" }), rig("C", { word: "Paused" })])).toBe("A is measuring. B waits for a task. C is paused."));

  test("an alarm that halted nothing", () => expect(say([rig("A"), rig("B")], 1)).toBe("Both rigs are measuring. One alarm is open that nobody has."));
});
