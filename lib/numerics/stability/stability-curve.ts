import { averagingFactors, type Taus } from "@/lib/numerics/stability/averaging-factors";
import { confidenceBand } from "@/lib/numerics/stability/confidence";
import { deviation, type Statistic } from "@/lib/numerics/stability/deviation";
import { edf } from "@/lib/numerics/stability/edf";
import { fewestAverages, identifyNoise } from "@/lib/numerics/stability/noise-type";
import { noiseNames, type Alpha, type NoiseType } from "@/lib/numerics/stability/power-law";
import { statisticShapes } from "@/lib/numerics/stability/statistic-shape";
import { totalBias } from "@/lib/numerics/stability/total-bias";

export type StabilityPoint = {
  m: number;
  tauS: number;
  deviation: number;
  lower: number;
  upper: number;
  /** Number of terms, which may overlap. */
  n: number;
  edf: number;
  noise: NoiseType;
  /** How the noise was had, where it could not be told at this averaging time. */
  noiseMarked?: "assumed" | "from the largest factor that has one";
};

type StabilityCurve = {
  stretches: readonly Float64Array[];
  tau0S: number;
  statistic: Statistic;
  taus: Taus;
  confidence: number;
  minEdf?: number;
};

/**
 * A stability statistic against averaging time, with a chi-squared band at each point.
 *
 * The noise type is identified at each averaging factor where a stretch has 30 averages; beyond, the type of the
 * largest factor that has one is taken and marked, and white FM is assumed where there is none at all. Degrees of
 * freedom follow from it, pooled over stretches. The total deviation is freed of its bias for that noise.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite; see `stretches`.
 * @param tau0S τ₀ in seconds.
 * @param confidence Probability that the band holds the true deviation, between 0 and 1.
 * @param minEdf Points with fewer degrees of freedom are left out; 0 by default.
 * @returns Points by rising averaging time, in the unit of the values (time deviation: that unit times seconds); none
 *   when no stretch has two values.
 * @throws RangeError if a value is not finite or the confidence not between 0 and 1.
 *
 * Linear in the number of values for each factor.
 */
export function stabilityCurve({ stretches, tau0S, statistic, taus, confidence, minEdf = 0 }: StabilityCurve): {
  points: StabilityPoint[];
} {
  const lengths = stretches.map((y) => y.length);
  const longest = lengths.reduce((most, length) => Math.max(most, length), 0);
  const noiseAt = noiseByFactor({ stretches, statistic, longest });

  const points: StabilityPoint[] = [];
  for (const m of averagingFactors(taus, longest)) {
    const estimate = deviation(statistic, stretches, m);
    if (!estimate) break;
    const { alpha, ...noise } = noiseAt(m);
    const degrees = edf(statistic, { lengths, alpha, m });
    if (degrees < minEdf) continue;
    const bias = statistic === "totdev" ? totalBias({ lengths, alpha, m }) : 1;
    const unit = (statistic === "tdev" ? tau0S : 1) / Math.sqrt(bias);
    const unbiased = estimate.deviation * unit;
    const band = confidenceBand({ deviation: unbiased, edf: degrees, confidence });
    points.push({ m, tauS: m * tau0S, deviation: unbiased, ...band, n: estimate.n, edf: degrees, ...noise });
  }
  return { points };
}

type FactorNoise = Pick<StabilityPoint, "noise" | "noiseMarked"> & { alpha: Alpha };

/** Asked for rising factors, so the last type identified is that of the largest factor that has one. */
function noiseByFactor({
  stretches,
  statistic,
  longest,
}: {
  stretches: readonly Float64Array[];
  statistic: Statistic;
  longest: number;
}): (m: number) => FactorNoise {
  const lowest = statisticShapes[statistic].differences === 3 ? -4 : -2;
  let last: FactorNoise = { alpha: 0, noise: noiseNames[0], noiseMarked: "assumed" };

  return (m) => {
    const found = m * fewestAverages <= longest ? identifyNoise(stretches, m, lowest) : undefined;
    if (found) {
      last = { alpha: found.alpha, noise: noiseNames[found.alpha] };
      return last;
    }
    return last.noiseMarked ? last : { ...last, noiseMarked: "from the largest factor that has one" };
  };
}
