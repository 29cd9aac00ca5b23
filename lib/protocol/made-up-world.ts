import { detourBlocks } from "./detours";
import { framesOf } from "./path";
import type { Definition } from "./schema";
import { type Pace, stepDurationS } from "./step-duration";
import { type Cursor, type Facts, type PhaseFacts, type StepPlan, type Track, trackKey } from "./types";

/** What an estimate or a forecast is made for. */
export type World = {
  /** Protocol time at its beginning. */
  nowMs: number;
  timeZone: string;
  abilities: Facts["abilities"];
  /** The sensor in air. */
  nominal: Track;
  /** Resonances known or guessed by medium; a liquid that is not named gets 0.85 f0 and Q/40 of the nominal ones. */
  resonances?: Readonly<Record<string, Track>>;
  /** Tracks there already are, by `trackKey`: what has one needs no search. */
  tracks?: Facts["tracks"];
};

/** The latest instant that calendars can still reckon with. */
const LAST_MS = 8e15;

/**
 * A world in which every step succeeds: searches find, phases are usable, and cleaning works at the first turn (`fast`), the
 * second (`likely`) or the last allowed (`slow`). Its only state is the clock, the tracks, and whether there is a reference.
 */
export class MadeUpWorld {
  private readonly tracks: Record<string, Track>;
  private hasReference: boolean;

  constructor(
    private readonly definition: Definition,
    private readonly world: World,
    readonly pace: Pace,
    cursor: Cursor,
  ) {
    this.elapsedS = 0;
    this.tracks = { ...world.tracks };
    this.hasReference = cursor.reference !== undefined;
  }

  elapsedS: number;

  get nowMs(): number {
    return Math.min(this.world.nowMs + this.elapsedS * 1000, LAST_MS);
  }

  /** The facts when the step that the cursor stands on has ended well. */
  facts(cursor: Cursor): Facts {
    const { timeZone, abilities, nominal } = this.world;
    const { f0Hz, q } = nominal;
    return {
      nowMs: this.nowMs,
      timeZone,
      abilities,
      nominal,
      tracks: this.tracks,
      ...(cursor.sequence > 0 && { last: { outcome: "done", phase: this.phase(cursor) } }),
      ...(this.hasReference && { baseline: { f0Hz, q, n: 1, complete: true } }),
    };
  }

  durationS(step: StepPlan): number {
    return stepDurationS(step, this.pace, this.nowMs);
  }

  /** Lets a step be done: time passes, and a measurement leaves a track. */
  finish(step: StepPlan, durationS: number): void {
    this.elapsedS += durationS;
    if (step.kind !== "measure") return;
    this.tracks[trackKey(step.medium, step.setPointC)] ??= this.resonance(step.medium);
    if (step.role === "reference") this.hasReference = true;
  }

  private resonance(medium: string): Track {
    const { resonances = {}, nominal } = this.world;
    if (Object.hasOwn(resonances, medium)) return resonances[medium];
    if (medium === "air") return nominal;
    return { f0Hz: 0.85 * nominal.f0Hz, q: Math.max(nominal.q / 40, 3) };
  }

  private phase(cursor: Cursor): PhaseFacts {
    const { f0Hz, q } = this.world.nominal;
    const n = { n: 1, nUsed: 1, unusable: 0 };
    return this.isStillDirty(cursor) ? { ...n, f0Hz: f0Hz / 2, q: q / 2 } : { ...n, f0Hz, q };
  }

  private isStillDirty(cursor: Cursor): boolean {
    const detour = cursor.detours.at(-1);
    const blocks = detour ? detourBlocks(this.definition, detour) : this.definition.blocks;
    const check = framesOf(blocks, (detour ?? cursor).path)?.at(-2);
    if (check?.block.kind !== "untilClean") return false;
    const { maxTimes } = check.block;
    const turns = { fast: 1, likely: Math.min(2, maxTimes), slow: maxTimes }[this.pace];
    return (check.entry.turn ?? 0) + 1 < turns;
  }
}
