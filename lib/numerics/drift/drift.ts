import { glsLine } from "@/lib/numerics/drift/gls-line";
import { leastSquaresLine } from "@/lib/numerics/drift/least-squares-line";
import { theilSen } from "@/lib/numerics/drift/theil-sen";

type SlopeWithLimits = { slopePerDay: number; lower: number; upper: number };

export type Drift = {
  /** By generalised least squares under power-law noise: the slope to quote. */
  slopePerDay: number;
  u: number;
  lower: number;
  upper: number;
  /** At 0 days. */
  intercept: number;
  /** Mean exponent of the noise about the line: 0 white, −1 flicker, −2 random walk. */
  alpha: number;
  leastSquares: SlopeWithLimits & { u: number; intercept: number };
  theilSen: SlopeWithLimits & { blockLength: number };
  n: number;
};

/**
 * Drift of a series of phase values: one slope to quote, with an uncertainty that holds under white, flicker and random
 * walk noise, and beside it the ordinary and the robust one, which hold under white noise only.
 *
 * @param atDays Times in days, rising, all finite.
 * @param values One per time, all finite.
 * @param u Standard uncertainties of the values, > 0: they weigh the ordinary line. The generalised line takes its
 *   noise from the scatter, which includes what a phase's own u cannot know.
 * @param confidence Probability of all intervals, between 0 and 1; 0.95 by default.
 * @returns Slopes in units of the values per day. Undefined below three values.
 * @throws RangeError if lengths differ, times do not rise, or a value is not finite.
 *
 * Sources: see `glsLine`, `leastSquaresLine`, `theilSen`.
 */
export function drift({
  atDays,
  values,
  u,
  confidence = 0.95,
}: {
  atDays: Float64Array;
  values: Float64Array;
  u?: Float64Array;
  confidence?: number;
}): Drift | undefined {
  const generalised = glsLine({ x: atDays, y: values, confidence });
  const ordinary = leastSquaresLine({ x: atDays, y: values, u, confidence });
  const robust = theilSen({ x: atDays, y: values, confidence });
  if (!generalised || !ordinary || !robust) return undefined;

  return {
    slopePerDay: generalised.slope,
    u: generalised.u,
    lower: generalised.lower,
    upper: generalised.upper,
    intercept: generalised.intercept,
    alpha: generalised.alpha,
    leastSquares: {
      slopePerDay: ordinary.slope,
      u: ordinary.slopeError,
      lower: ordinary.lower,
      upper: ordinary.upper,
      intercept: ordinary.intercept,
    },
    theilSen: { slopePerDay: robust.slope, lower: robust.lower, upper: robust.upper, blockLength: robust.blockLength },
    n: values.length,
  };
}
