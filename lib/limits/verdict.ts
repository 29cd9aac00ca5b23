/** The values of one role and medium, oldest first, one per phase with a value, of one mount and set-point. */
export type PhaseSeries = { atDays: Float64Array; f0Hz: Float64Array; q: Float64Array };

/** What limits over phases need to know, gathered when a phase has closed. */
export type LimitFacts = {
  phase: {
    medium: string;
    role: "reference" | "check" | "sample";
    n: number;
    /** Fits flagged `edge` or `failed`. */
    unusable: number;
    f0Hz?: number;
    q?: number;
    /** Extremes of the cell temperature over the phase; undefined when it was not measured. */
    minC?: number;
    maxC?: number;
  };
  /** Of the present mount and set-point. */
  baseline?: { f0Hz: number; q: number; complete: boolean };
  /** Phases of the closed phase's medium and role since the baseline began, the closed one last. */
  series: PhaseSeries;
};

export type Verdict = {
  limitId: string;
  kind: string;
  /** `inside` is within `clearAt` of the limit; between that and the limit an open alarm neither returns nor opens. */
  state: "breach" | "between" | "inside";
  value: number;
  limit: number;
  unit: string;
  /** How far off, in words: "air reference f0 is −72 ppm from the baseline, limit ± 60 ppm". */
  text: string;
};

export function stateOf(value: number, limit: number, clearAt: number): Verdict["state"] {
  if (value > limit) return "breach";
  return value <= limit * clearAt ? "inside" : "between";
}

const rank = { breach: 2, between: 1, inside: 0 } as const;

/** The verdict that matters most where one limit judges more than one thing; the farther beyond its limit, the worse. */
export function worst(verdicts: readonly Verdict[]): Verdict | undefined {
  return verdicts.toSorted((a, b) => rank[b.state] - rank[a.state] || Math.abs(b.value / b.limit) - Math.abs(a.value / a.limit))[0];
}

/** Numbers in sentences: at most three significant digits, a true minus sign. */
export function say(value: number): string {
  const digits = Math.abs(value) >= 100 ? value.toFixed(0) : String(Number(value.toPrecision(3)));
  return digits.replace("-", "−");
}
