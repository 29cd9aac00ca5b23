import { describe, expect, test } from "vitest";
import { limitParts } from "@/lib/protocol/limit-sentence";
import { parseDefinition } from "@/lib/protocol/schema";
import { sentenceParts, sweepParts, textOf } from "@/lib/protocol/sentence";
import { readDraft } from "@/lib/protocols/draft";
import { ownerOf, sortErrors } from "@/lib/protocols/draft-errors";
import { BLOCK_WORDS, LIMIT_WORDS } from "@/lib/protocols/new-block";
import { parseDuration, showDuration } from "@/lib/protocols/typed-duration";

describe("parseDuration", () => {
  test.each([
    ["90", 90],
    ["90 s", 90],
    ["10min", 600],
    ["1 h 30 min", 5400],
    ["1,5 h", 5400],
    ["2 d 4 h", 187_200],
    ["0.5 s", 0.5],
    ["", undefined],
    ["  ", undefined],
    ["soon", "soon"],
    ["10 parsecs", "10 parsecs"],
    ["-5 s", "-5 s"],
    ["1 h foo", "1 h foo"],
  ])("%j is %j", (typed, expected) => expect(parseDuration(typed)).toBe(expected));

  test.each([0, 0.04, 0.5, 59.96, 60, 90, 5400, 86_400, 1_000_000.5])("%d s are shown so that they are read again", (seconds) => {
    expect(parseDuration(showDuration(seconds))).toBe(seconds);
  });

  test("what is no time is shown as it was typed", () => {
    expect([showDuration("soon"), showDuration(undefined), showDuration(-3)]).toEqual(["soon", "", "-3"]);
  });
});

describe("mistakes", () => {
  const draft = readDraft(
    {
      name: "",
      readout: "velocity",
      blocks: [
        { id: "r", kind: "repeat", times: 1.5, blocks: [{ id: "f", kind: "fill", slot: "air", volumeMl: "4o" }] },
        { id: "u", kind: "untilClean", blocks: [{ id: "d", kind: "drain" }], measure: { id: "m", kind: "measure", medium: "air", repeats: 0, sweep: { points: 5 } }, maxTimes: 1, otherwise: "hold" },
      ],
      limits: [{ id: "l", kind: "silence", does: [], afterS: 60 }],
    },
    () => "made",
  );

  test("stand at the field of the block, limit or protocol that they are in, in plain words", () => {
    const parsed = parseDefinition(draft, () => "made");
    if (parsed.ok) throw new Error("it has mistakes");
    const sorted = sortErrors(draft, parsed.errors);
    const at = (id: string) => Object.fromEntries(sorted.get(id) ?? []);
    expect(at("")).toEqual({ name: "A protocol needs a name" });
    expect(at("r")).toEqual({ times: "A whole number is needed" });
    expect(at("f")).toEqual({ slot: "air is no slot name", volumeMl: "A number is needed", flowMlPerMin: "This is needed" });
    expect(at("u")).toEqual({ tolerancePpm: "This is needed" });
    expect(at("m")).toMatchObject({ repeats: "It has to be at least 1", "sweep.points": "It has to be at least 11", "sweep.driveV": "This is needed" });
    expect(at("l")).toEqual({ does: "A limit does at least one thing" });
  });

  test("a path that leads nowhere belongs to the protocol", () => {
    expect(ownerOf(draft, "blocks.9.times")).toEqual({ id: "", field: "blocks.9.times" });
    expect(ownerOf(draft, "blocks.0.blocks")).toEqual({ id: "r", field: "blocks" });
  });
});

describe("sentences of what is still being written", () => {
  test.each(Object.keys(BLOCK_WORDS))("a %s without any field", (kind) => {
    expect(textOf(sentenceParts({ kind }))).toMatch(/^[A-Z].*[.…]$/u);
    expect(textOf(sweepParts({ kind }))).toContain("…");
  });

  test("values carry the path of their field", () => {
    const paths = sentenceParts({ kind: "fill", slot: "oil", volumeMl: 40, flowMlPerMin: 20 }).flatMap((part) => (typeof part === "string" ? [] : [[part.path, part.value]]));
    expect(paths).toEqual([["volumeMl", "40 mL"], ["slot", "oil"], ["flowMlPerMin", "20 mL/min"]]);
  });

  test.each([
    [{ kind: "return", tolerancePpm: 15, toleranceQPercent: 2, medium: "air", does: ["mail", "cleanAgain"] }, "If the reference in air is off by more than 15 ppm or 2 % in Q: mail, clean again."],
    [{ kind: "drift", quantity: "f0", crossesPpm: 50, withinDays: 30, does: ["mail"] }, "If f₀ drifts so that it crosses 50 ppm within 30 days: mail."],
    [{ kind: "drift", quantity: "q", ppmPerDay: 2, medium: "oil", does: ["note"] }, "If Q in oil drifts by more than 2 ppm a day: note it."],
    [{ kind: "step", quantity: "f0", sigma: 3, does: ["hold"], deadTimeS: 3600 }, "If f₀ steps by 3 σ: hold, at most once in 1 h."],
    [{ kind: "noise", quantity: "f0", factor: 4, does: ["mail"] }, "If the variance of f₀ grows by a factor of 4: mail."],
    [{ kind: "fit", sharePercent: 20, does: ["mail", "hold"] }, "If more than 20 % of a phase cannot be fitted: mail, hold."],
    [{ kind: "temperature", minC: 15, maxC: 35, does: ["stop"] }, "If the cell leaves 15 °C to 35 °C: stop."],
    [{ kind: "silence", afterS: 1800, does: ["mail"] }, "If the rig is silent for 30 min: mail."],
    [{ kind: "count", failedSteps: 3, does: ["hold"] }, "If 3 attempts fail in a row: hold."],
  ])("%j", (limit, expected) => expect(textOf(limitParts(limit))).toBe(expected));

  test.each(Object.keys(LIMIT_WORDS))("a %s limit without any field", (kind) => {
    expect(textOf(limitParts({ kind }))).toMatch(/^If .*…/u);
  });
});
