import { stepLabel } from "./labels";
import { nextLocalTime } from "./local-time";
import type { Definition, LeafBlock, MeasureBlock } from "./schema";
import { findSweep, followsTrack, resolveSweep } from "./sweep-params";
import { type Cursor, type DetourKind, type Facts, type PathEntry, type StepPlan, type Track, trackKey } from "./types";

const FIND_REPEATS = 2;

type Given = { definition: Definition; draft: Cursor; facts: Facts; block: LeafBlock; leaf: PathEntry; cycle: number; detour?: DetourKind };

/**
 * The step of a block, or of the search that has to come before it. Undefined where the sweep lies outside the rig's
 * range. Marks the search on the leaf; the sequence number is the draft's next.
 */
export function makeStep({ definition, draft, facts, block, leaf, cycle, detour }: Given): StepPlan | undefined {
  const base = {
    sequence: draft.sequence + 1,
    blockId: block.id,
    cycle,
    setPointC: draft.setPointC,
    label: stepLabel(block),
    ...(detour && { detour }),
  };
  switch (block.kind) {
    case "measure":
      return measureStep({ definition, draft, facts, block, leaf }, base);
    case "fill":
      return { ...base, kind: "fill", slot: block.slot, params: { volumeMl: block.volumeMl, flowMlPerMin: block.flowMlPerMin } };
    case "drain":
      return { ...base, kind: "drain", params: {} };
    case "rinse":
      return { ...base, kind: "rinse", slot: block.slot, params: { volumeMl: block.volumeMl, times: block.times } };
    case "dry": {
      const { seconds, flowMlPerMin } = block;
      return { ...base, kind: "dry", params: { seconds, ...(flowMlPerMin !== undefined && { flowMlPerMin }) } };
    }
    case "settle": {
      const { temperatureC, toleranceC, holdS, timeoutS } = block;
      if (temperatureC === "each") throw new RangeError("each stands outside a forEach over temperatures");
      return { ...base, kind: "settle", params: { temperatureC, toleranceC, holdS, timeoutS } };
    }
    case "wait":
      return { ...base, kind: "wait", params: { dueAtMs: dueAt(block, facts) } };
    case "ask":
      return { ...base, kind: "ask", params: { instruction: block.instruction, urgency: block.urgency } };
  }
}

type Base = Pick<StepPlan, "sequence" | "blockId" | "cycle" | "setPointC" | "label" | "detour">;

function measureStep(
  { definition, draft, facts, block, leaf }: Omit<Given, "block" | "cycle"> & { block: MeasureBlock },
  base: Base,
): StepPlan | undefined {
  const { medium } = block;
  const track = facts.tracks[trackKey(medium, draft.setPointC)];
  if (leaf.find || (followsTrack(block.sweep) && !track)) {
    leaf.find = true;
    const sweep = findSweep(block.sweep, {
      search: definition.search,
      medium,
      nominal: facts.nominal,
      elsewhere: track ?? nearestTrack(medium, draft.setPointC, facts),
      abilities: facts.abilities,
    });
    if (!sweep) return undefined;
    const params = { repeats: FIND_REPEATS, discard: 0, pauseS: 0, sweep };
    return { ...base, label: `Find the resonance in ${medium}`, detour: "find", kind: "measure", medium, role: "find", params };
  }

  const sweep = resolveSweep(block.sweep, track, facts.abilities);
  if (!sweep) return undefined;
  const { repeats, discard, pauseS, role } = block;
  const params = { repeats, discard, pauseS, sweep };
  return { ...base, ...(leaf.attempt && { detour: "again" }), kind: "measure", medium, role, params };
}

/** The resonance in the same medium at the set-point nearest to the present one. */
function nearestTrack(medium: string, setPointC: number | null, { tracks }: Facts): Track | undefined {
  const start = `${medium}|`;
  const distance = (key: string) => Math.abs(Number(key.slice(start.length)) - (setPointC ?? 20));
  const keys = Object.keys(tracks).filter((key) => key.startsWith(start));
  return keys.length === 0 ? undefined : tracks[keys.reduce((best, key) => (distance(key) < distance(best) ? key : best))];
}

function dueAt(block: Extract<LeafBlock, { kind: "wait" }>, { nowMs, timeZone }: Facts): number {
  return block.until ? nextLocalTime(block.until, nowMs, timeZone) : nowMs + (block.seconds ?? 0) * 1000;
}
