import type { DriftAnswer } from "@/lib/analysis/schema";
import { formatCount, formatNumber, formatUncertain, plural } from "@/lib/format";

type DriftWordsProps = { drift: DriftAnswer; name: string; n: number; leftOut: number };

/** The drift in words, with the ordinary and the robust slope beside it. */
export function DriftWords({ drift, name, n, leftOut }: DriftWordsProps) {
  const counted = `${formatCount(n)} ${plural(n, "repeat")} shown${leftOut > 0 ? `, ${formatCount(leftOut)} left out of the phase values` : ""}.`;
  const { slopePerDay, u, ppmPerDay, lower, upper, leastSquares, theilSen } = drift;
  if (slopePerDay === null || u === null || lower === null || upper === null || ppmPerDay === null) {
    return <>No drift yet: {drift.used}. {counted}</>;
  }
  const inMHz = (hz: number) => formatNumber(hz * 1000, { decimals: 2, signed: true });
  return (
    <>
      {name} drifts by <b className="num">{formatUncertain(slopePerDay * 1000, u * 1000, { signed: true })} mHz a day</b> ({formatNumber(ppmPerDay, { decimals: 3, signed: true })} ppm; 95 % from {inMHz(lower)} to {inMHz(upper)} mHz), by
      generalised least squares over {drift.used}; the band is that of the slope.
      {leastSquares && ` Ordinary line ${formatUncertain(leastSquares.slopePerDay * 1000, leastSquares.u * 1000, { signed: true })}`}
      {theilSen && `, Theil–Sen ${inMHz(theilSen.slopePerDay)}`}
      {(leastSquares || theilSen) && " mHz a day."} {counted}
    </>
  );
}
