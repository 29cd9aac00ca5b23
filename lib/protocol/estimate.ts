import { start } from "./interpreter";
import type { World } from "./made-up-world";
import { type Counts, runThrough } from "./run-through";
import type { Definition } from "./schema";

export type Estimate = {
  seconds: { low: number; likely: number; high: number };
  steps: number;
  /** Of phases; those of searches are not counted. */
  repeats: number;
  phases: number;
  cycles: number;
  /** What an average cycle measures and takes; absent without cycles. */
  perCycle?: { seconds: number; phases: number; repeats: number };
  mlPerSlot: Record<string, number>;
  /** Everything that was filled or rinsed with ends as waste. */
  wasteMl: number;
  /** As far as cleaning may go at worst. */
  atMost: { mlPerSlot: Record<string, number>; wasteMl: number };
  people: {
    /** How often an operator has to answer. */
    asks: number;
    /** Bottles to be put on, by slot. */
    bottles: Record<string, number>;
  };
  /** Every turn was gone through; else long loops were multiplied (see `runThrough`). */
  isExact: boolean;
};

/**
 * How long a protocol takes and what it uses up: the interpreter on three made-up worlds, fast, likely and slow. Amounts are
 * those of the likely one. Lasts some milliseconds to tenths of a second, whatever the number of turns.
 *
 * @param bottleMl What a bottle holds, for counting bottles.
 */
export function estimate(definition: Definition, world: World, bottleMl = 1000): Estimate {
  const [fast, likely, slow] = (["fast", "likely", "slow"] as const).map((pace) =>
    runThrough(definition, world, pace, start(definition)),
  );
  const of = (key: string) => likely.counts.get(key) ?? 0;
  const { cycles } = likely;
  const mlPerSlot = millilitres(likely.counts);
  const atMostMl = millilitres(slow.counts);
  return {
    seconds: { low: fast.seconds, likely: likely.seconds, high: slow.seconds },
    steps: of("steps"),
    repeats: of("repeats"),
    phases: of("phases"),
    cycles,
    ...(cycles > 0 && {
      perCycle: {
        seconds: of("cycleSeconds") / cycles,
        phases: of("cyclePhases") / cycles,
        repeats: of("cycleRepeats") / cycles,
      },
    }),
    mlPerSlot,
    wasteMl: sum(mlPerSlot),
    atMost: { mlPerSlot: atMostMl, wasteMl: sum(atMostMl) },
    people: {
      asks: of("asks"),
      bottles: Object.fromEntries(Object.entries(mlPerSlot).map(([slot, ml]) => [slot, Math.ceil(ml / bottleMl)])),
    },
    isExact: fast.isExact && likely.isExact && slow.isExact,
  };
}

function millilitres(counts: Counts): Record<string, number> {
  const entries = [...counts].filter(([key]) => key.startsWith("ml:"));
  return Object.fromEntries(entries.map(([key, ml]) => [key.slice("ml:".length), ml]));
}

function sum(values: Record<string, number>): number {
  return Object.values(values).reduce((total, value) => total + value, 0);
}
