import fc from "fast-check";
import { expect, test } from "vitest";
import { next, redirect, start } from "@/lib/protocol/interpreter";
import type { Redirection, StepPlan } from "@/lib/protocol/types";
import { define, drain, dry, fill, measure, settle, sweep } from "./definitions";
import { isStep, stored } from "./drive";
import { TestWorld } from "./test-world";

const definition = define(
  [
    {
      kind: "forEach",
      over: { temperaturesC: [20, 30] },
      blocks: [
        settle("each"),
        {
          kind: "repeat",
          times: 3,
          blocks: [
            measure("air", { sweep }),
            {
              kind: "forEach",
              over: { slots: ["a", "b"] },
              blocks: [
                fill("each"),
                { kind: "repeat", times: 2, blocks: [measure("each", { sweep }), { kind: "wait", seconds: 60 }] },
                drain,
                { kind: "rinse", slot: "s", volumeMl: 5, times: 2 },
                { kind: "untilClean", blocks: [dry], measure: measure("air"), tolerancePpm: 20, maxTimes: 2, otherwise: "continue" },
              ],
            },
          ],
        },
      ],
    },
  ],
  { park: [drain, dry, settle(22)], cleaning: [drain, { kind: "rinse", slot: "s", volumeMl: 5, times: 1 }, dry] },
);

const anyRedirection = fc.oneof<fc.Arbitrary<Redirection>[]>(
  fc.constant({ kind: "park" }),
  fc.constantFrom("here" as const, "phase" as const, "cycle" as const).map((from) => ({ kind: "resume", from })),
  fc.constantFrom("phase" as const, "cycle" as const).map((from) => ({ kind: "reference", from })),
  fc.constant({ kind: "cleanAgain", limitId: "l", maxTimes: 100 }),
);
const anyEvents = fc.array(fc.record({ after: fc.integer({ min: 0, max: 12 }), redirection: anyRedirection }), { maxLength: 12 });

/** A cell and a thermostat that know nothing of the interpreter. */
class Apparatus {
  cell = "air";
  temperatureC = 22;

  /** Throws where a step does not fit what is there. */
  do(step: StepPlan): void {
    if (step.kind === "fill") {
      expect(["air", "rinsed"]).toContain(this.cell);
      this.cell = step.slot;
    } else if (step.kind === "rinse") this.cell = "rinsed";
    else if (step.kind === "drain" || step.kind === "dry") this.cell = "air";
    else if (step.kind === "settle") this.temperatureC = step.params.temperatureC;
    else if (step.kind === "measure") {
      expect(this.cell).toBe(step.medium);
      if (step.setPointC !== null) expect(this.temperatureC).toBe(step.setPointC);
    }
  }
}

test("wherever a campaign is sent, whenever, it measures what is in the cell, never fills a full one, and comes to its end", () => {
  fc.assert(
    fc.property(anyEvents, fc.array(fc.boolean(), { minLength: 1, maxLength: 5 }), (events, dirty) => {
      const world = new TestWorld(0, { dirty, unusable: [false] });
      const apparatus = new Apparatus();
      let cursor = start(definition);
      let sequence = 0;
      const left = [...events];
      let until = left[0]?.after ?? Infinity;
      for (let turn = 0; turn < 2000; turn++) {
        if (until-- <= 0) {
          const event = left.shift();
          until = left[0]?.after ?? Infinity;
          const sent = event && redirect(definition, cursor, event.redirection);
          if (sent && !("impossible" in sent)) cursor = stored(sent);
        }
        const answer = next(definition, cursor, world.facts);
        cursor = stored(answer.cursor);
        if (isStep(answer.action)) {
          expect(answer.action.step.sequence).toBe(++sequence);
          apparatus.do(answer.action.step);
          world.do(answer.action.step);
        } else if (answer.action.do === "parked") {
          const from = cursor.parked?.begun ? "phase" : "here";
          if (left.length === 0) cursor = redirect(definition, cursor, { kind: "resume", from }) as typeof cursor;
        } else if (answer.action.do === "hold") throw new Error(answer.action.text);
        else {
          expect(answer.action.do).toBe("finish");
          return;
        }
      }
      throw new Error("no end");
    }),
    { numRuns: 150 },
  );
}, 30_000);
