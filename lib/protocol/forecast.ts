import { MadeUpWorld, type World } from "./made-up-world";
import { next } from "./next";
import { redirect } from "./redirect";
import type { Definition } from "./schema";
import type { Cursor, StepPlan } from "./types";

/** One planned step, as a run strip draws it. Seconds count from the world's `nowMs`. */
export type Segment = {
  sequence: number;
  blockId: string;
  kind: StepPlan["kind"];
  role?: "reference" | "check" | "sample" | "find";
  medium?: string;
  slot?: string;
  cycle: number;
  setPointC: number | null;
  startS: number;
  durationS: number;
  label: string;
};

/**
 * What is planned after the step that the cursor stands on, which is taken as done at `world.nowMs`. A held or parked campaign
 * is taken as resumed: where it stands, or from the phase if it has been parked.
 *
 * @param limit The most steps to look ahead.
 */
export function forecast(definition: Definition, cursor: Cursor, world: World, limit: number): Segment[] {
  const segments: Segment[] = [];
  let at = resumed(definition, cursor);
  const madeUp = new MadeUpWorld(definition, world, "likely", at);
  while (segments.length < limit) {
    const { cursor: reached, action } = next(definition, at, madeUp.facts(at));
    at = reached;
    if (action.do !== "step") break;
    const { step } = action;
    const startS = madeUp.elapsedS;
    const durationS = madeUp.durationS(step);
    madeUp.finish(step, durationS);
    segments.push({
      sequence: step.sequence,
      blockId: step.blockId,
      kind: step.kind,
      ...(step.kind === "measure" && { role: step.role, medium: step.medium }),
      ...((step.kind === "fill" || step.kind === "rinse") && { slot: step.slot }),
      cycle: step.cycle,
      setPointC: step.setPointC,
      startS,
      durationS,
      label: step.label,
    });
  }
  return segments;
}

/** A held or parked campaign as it would be if somebody let it go on now. */
export function resumed(definition: Definition, cursor: Cursor): Cursor {
  if (cursor.redirection || (!cursor.parked && !cursor.held)) return cursor;
  const to = redirect(definition, cursor, { kind: "resume", from: cursor.parked?.begun ? "phase" : "here" });
  return "impossible" in to ? cursor : to;
}
