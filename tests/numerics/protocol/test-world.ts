import { type Facts, type PhaseFacts, type StepPlan, trackKey } from "@/lib/protocol/types";

export const f0Hz = 8000;
export const q = 500;

/** What happens in a world is told beforehand, by the number of the phase; the lists are gone round. */
export type Story = { dirty: boolean[]; unusable: boolean[] };

/** A rig and its sensor for tests: steps take hours, measurements leave tracks, checks find what the story tells. */
export class TestWorld {
  readonly facts: Facts;
  private phases = 0;

  constructor(
    startMs: number,
    private readonly story: Story = { dirty: [false], unusable: [false] },
  ) {
    this.facts = {
      nowMs: startMs,
      timeZone: "UTC",
      abilities: { minHz: 100, maxHz: 100_000, maxPoints: 4001, maxDriveV: 1 },
      nominal: { f0Hz, q },
      tracks: {},
    };
  }

  /** Does a step and tells how it ended. */
  do(step: StepPlan): PhaseFacts | undefined {
    this.facts.nowMs += 3_600_000 * (1 + (step.sequence % 5));
    const phase = step.kind === "measure" ? this.measure(step) : undefined;
    this.facts.last = { outcome: "done", ...(phase && { phase }) };
    return phase;
  }

  private measure(step: Extract<StepPlan, { kind: "measure" }>): PhaseFacts | undefined {
    this.facts.tracks = { ...this.facts.tracks, [trackKey(step.medium, step.setPointC)]: { f0Hz, q } };
    if (step.role === "find") return undefined;
    if (step.role === "reference") this.facts.baseline ??= { f0Hz, q, n: 1, complete: false };
    const number = this.phases++;
    const isDirty = this.story.dirty[number % this.story.dirty.length];
    const isUnusable = this.story.unusable[number % this.story.unusable.length];
    return { f0Hz: isDirty ? f0Hz * (1 - 50e-6) : f0Hz, q, n: 4, nUsed: isUnusable ? 1 : 4, unusable: isUnusable ? 3 : 2 };
  }
}
