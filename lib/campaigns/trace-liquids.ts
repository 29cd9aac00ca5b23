import type { Block, Definition } from "@/lib/protocol/schema";

/** What may be in the cell at one point of a protocol; a set holds every possibility. */
type State = { inCell: Set<string>; residue: Set<string>; last: Set<string>; temperaturesC: Set<number> };

/** The values that `each` stands for. */
type Each = { slot?: string; temperaturesC: readonly number[] };

export type LiquidTrace = {
  /** By slot: the highest set-point while it is in the cell. */
  hottestC: ReadonlyMap<string, number>;
  /** Slots whose residue is dried with air. */
  dried: ReadonlySet<string>;
  /** Slots that follow each other in the cell, as `before` and `after`. */
  followed: readonly { before: string; after: string }[];
  /** False when the loops are too many to go through; then the rest says too little. */
  complete: boolean;
};

const MAX_VISITS = 200_000;

/**
 * Goes through a protocol once for each thing a `forEach` goes over, and through other loops until nothing new can come of
 * another turn: which liquids are heated how far, dried, or follow one another. Turns are never counted, so the length of a
 * campaign costs nothing. Where several set-points are possible the hottest counts; park and cleaning may come at any point.
 */
export function traceLiquids(definition: Definition): LiquidTrace {
  const tracer = new Tracer();
  tracer.run(definition.blocks, empty(), { temperaturesC: [] });
  const anywhere = tracer.everything();
  for (const blocks of [definition.cleaning, definition.park]) if (blocks) tracer.run(blocks, copy(anywhere), { temperaturesC: [] });
  return tracer.result();
}

class Tracer {
  private readonly hottestC = new Map<string, number>();
  private readonly dried = new Set<string>();
  private readonly followed = new Map<string, { before: string; after: string }>();
  private readonly seen = empty();
  private visits = 0;

  run(blocks: readonly Block[], state: State, each: Each): void {
    for (const block of blocks) {
      if (++this.visits > MAX_VISITS) return;
      this.visit(block, state, each);
      merge(this.seen, state);
    }
  }

  everything = (): State => this.seen;

  result = (): LiquidTrace => ({
    hottestC: this.hottestC,
    dried: this.dried,
    followed: [...this.followed.values()],
    complete: this.visits <= MAX_VISITS,
  });

  private visit(block: Block, state: State, each: Each): void {
    switch (block.kind) {
      case "fill":
        this.put(nameOf(block.slot, each), state);
        state.inCell = new Set([nameOf(block.slot, each)]);
        break;
      case "rinse":
        this.put(nameOf(block.slot, each), state);
        state.inCell = new Set();
        break;
      case "drain":
        state.inCell = new Set();
        break;
      case "dry":
        for (const slot of state.residue) this.dried.add(slot);
        state.residue = new Set();
        state.inCell = new Set();
        break;
      case "settle":
        state.temperaturesC = new Set(block.temperatureC === "each" ? each.temperaturesC : [block.temperatureC]);
        for (const slot of state.inCell) this.heat(slot, state.temperaturesC);
        break;
      case "repeat":
        if (block.times === 1) this.run(block.blocks, state, each);
        else this.repeat(block.blocks, state, each);
        break;
      case "untilClean":
        this.repeat(block.blocks, state, each);
        break;
      case "forEach":
        this.forEach(block, state, each);
    }
  }

  private put(slot: string, state: State): void {
    for (const before of state.last) if (before !== slot) this.followed.set(`${before}|${slot}`, { before, after: slot });
    this.heat(slot, state.temperaturesC);
    state.last = new Set([slot]);
    state.residue = new Set([slot]);
  }

  private heat(slot: string, temperaturesC: ReadonlySet<number>): void {
    for (const temperatureC of temperaturesC) this.hottestC.set(slot, Math.max(temperatureC, this.hottestC.get(slot) ?? -Infinity));
  }

  /** Turns until one leaves the state as the turn before did. The sets of what can follow are small, so this ends after a few. */
  private repeat(blocks: readonly Block[], state: State, each: Each): void {
    for (let before = ""; before !== keyOf(state) && this.visits <= MAX_VISITS; ) {
      before = keyOf(state);
      this.run(blocks, state, each);
    }
  }

  private forEach(block: Extract<Block, { kind: "forEach" }>, state: State, each: Each): void {
    if ("slots" in block.over) {
      for (const slot of block.over.slots) this.run(block.blocks, state, { ...each, slot });
    } else {
      // All set-points at once, twice: what the last turn leaves in the cell meets the next turn's set-points.
      for (let turn = 0; turn < Math.min(2, block.over.temperaturesC.length); turn++)
        this.run(block.blocks, state, { ...each, temperaturesC: block.over.temperaturesC });
    }
  }
}

const nameOf = (slot: string, each: Each): string => (slot === "each" ? (each.slot ?? slot) : slot);

const empty = (): State => ({ inCell: new Set(), residue: new Set(), last: new Set(), temperaturesC: new Set() });

const copy = (state: State): State => ({
  inCell: new Set(state.inCell),
  residue: new Set(state.residue),
  last: new Set(state.last),
  temperaturesC: new Set(state.temperaturesC),
});

function merge(into: State, from: State): void {
  for (const slot of from.inCell) into.inCell.add(slot);
  for (const slot of from.residue) into.residue.add(slot);
  for (const slot of from.last) into.last.add(slot);
  for (const temperatureC of from.temperaturesC) into.temperaturesC.add(temperatureC);
}

const keyOf = ({ inCell, residue, last, temperaturesC }: State): string =>
  JSON.stringify([inCell, residue, last, temperaturesC].map((set) => [...set].map(String).sort()));
