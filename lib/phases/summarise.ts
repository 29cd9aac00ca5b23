import { LEFT_OUT, flagBits, flagNames } from "@/lib/numerics/resonance/flags";
import { phaseValue, type PhaseValue } from "@/lib/numerics/resonance/phase-value";
import type { PhaseColumns } from "@/lib/phases/columns";

export type Spread = { mean: number; sd: number };

export type PhaseSummaryValues = {
  n: number;
  nUsed: number;
  /** Fits flagged `edge` or `failed`. */
  unusable: number;
  f0: PhaseValue;
  q: PhaseValue;
  temperatureC: Spread;
  flagCounts: Record<string, number>;
};

type Options = { /** Standard errors of Q, by repeat. */ qStd?: Float64Array; medianR1?: { f0: number; q: number } };

const UNUSABLE = flagBits(["failed", "edge"]);

/** The phase's values from its columns, over what is not left out. Marks nothing: `leftOut` is set before. */
export function summarise(columns: PhaseColumns, { qStd, medianR1 }: Options = {}): PhaseSummaryValues {
  const { n, f0Hz, q, f0StdHz, temperatureC, flags, leftOut } = columns;
  const f0 = new Float64Array(n);
  const qs = new Float64Array(n);
  let nUsed = 0;
  let unusable = 0;
  let last = 0;
  const bitCounts = new Map<number, number>();
  for (let i = 0; i < n; i++) {
    if (flags[i] & UNUSABLE) unusable++;
    if (flags[i]) bitCounts.set(flags[i], (bitCounts.get(flags[i]) ?? 0) + 1);
    if (leftOut[i] || !Number.isFinite(f0Hz[i]) || !Number.isFinite(q[i])) continue;
    f0[nUsed] = f0Hz[i];
    qs[nUsed] = q[i];
    last = i;
    nUsed++;
  }
  const ofOne = (std: number | undefined) => (nUsed === 1 && Number.isFinite(std) ? std : undefined);
  return {
    n,
    nUsed,
    unusable,
    f0: phaseValue(f0.subarray(0, nUsed), { fitStd: ofOne(f0StdHz[last]), medianR1: medianR1?.f0 }),
    q: phaseValue(qs.subarray(0, nUsed), { fitStd: ofOne(qStd?.[last]), medianR1: medianR1?.q }),
    temperatureC: spread(temperatureC),
    flagCounts: countFlags(bitCounts),
  };
}

/** 1 for each reading that does not count: before `discard`, flagged so, excluded, or without a fit. */
export function markLeftOut(columns: PhaseColumns, { discard, excluded }: { discard: number; excluded: ReadonlySet<number> }): void {
  for (let i = 0; i < columns.n; i++) {
    const out =
      columns.idx[i] < discard || (columns.flags[i] & LEFT_OUT) !== 0 || excluded.has(columns.idx[i]) || !Number.isFinite(columns.f0Hz[i]);
    columns.leftOut[i] = out ? 1 : 0;
  }
}

function countFlags(bitCounts: ReadonlyMap<number, number>): Record<string, number> {
  const counts: Record<string, number> = {};
  for (const [bits, count] of bitCounts) for (const name of flagNames(bits)) counts[name] = (counts[name] ?? 0) + count;
  return counts;
}

/** Mean and standard deviation of the finite values, NaN without any. */
function spread(values: Float64Array): Spread {
  let n = 0;
  let mean = 0;
  let squares = 0;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    n++;
    const d = value - mean;
    mean += d / n;
    squares += d * (value - mean);
  }
  return { mean: n > 0 ? mean : NaN, sd: n > 1 ? Math.sqrt(squares / (n - 1)) : NaN };
}
