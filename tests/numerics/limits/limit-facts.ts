import type { LimitFacts } from "@/lib/limits/verdict";
import { limitSchema } from "@/lib/protocol/limit-schema";
import type { Limit } from "@/lib/protocol/schema";

/** A limit as a protocol holds it, with the defaults of its schema. */
export const limitOf = <Kind extends Limit["kind"]>(given: { kind: Kind } & Record<string, unknown>) =>
  ({ id: "limit", ...limitSchema.parse({ does: ["mail"], ...given }) }) as Extract<Limit, { kind: Kind }>;

const BASELINE = { f0Hz: 2400, q: 1800, complete: true };

/** f0 so many ppm off 2 400 Hz. */
export const f0At = (ppm: number): number => 2400 * (1 + ppm * 1e-6);

type Given = { ppm?: number; q?: number; series?: readonly number[]; phase?: Partial<LimitFacts["phase"]>; baseline?: LimitFacts["baseline"] | null; perDay?: number };

/** An air reference that closed after others like it, one in so many parts of a day. */
export function factsOf({ ppm = 0, q = 1800, series, phase, baseline = BASELINE, perDay = 1 }: Given = {}): LimitFacts {
  const shifts = series ?? [0, 0, 0, ppm];
  return {
    phase: { medium: "air", role: "reference", n: 20, unusable: 0, f0Hz: f0At(ppm), q, minC: 20, maxC: 20, ...phase },
    baseline: baseline ?? undefined,
    series: {
      atDays: Float64Array.from(shifts, (_, i) => i / perDay),
      f0Hz: Float64Array.from(shifts, f0At),
      q: Float64Array.from(shifts, (shift) => 1800 * (1 + shift * 1e-6)),
    },
  };
}
