import type { DriftAnswer } from "@/lib/analysis/schema";
import { formatNumber, formatUncertain, NO_VALUE, uncertaintyDecimals } from "@/lib/format";
import { formatDayTime, formatDuration } from "@/lib/format-time";
import type { Shown } from "./drift-data";

type TableProps = { drift: DriftAnswer; shown: Shown };

/** The slope to quote, and the ordinary and the robust one beside it. */
export function SlopeTable({ drift, shown: { scale, unit } }: TableProps) {
  const { slopePerDay, u, lower, upper, leastSquares, theilSen, alpha } = drift;
  const inThree = (value: number) => formatNumber(value, { decimals: u !== null && u > 0 ? Math.max(0, uncertaintyDecimals(u * scale, 2)) : 3, signed: true });
  const rows = [
    { name: "Generalised least squares", slope: slopePerDay, u, lower, upper, note: alpha == null ? "" : `noise exponent ${formatNumber(alpha, { decimals: 1 })}` },
    ...(leastSquares ? [{ name: "Ordinary least squares", slope: leastSquares.slopePerDay, u: leastSquares.u, lower: leastSquares.lower, upper: leastSquares.upper, note: "white noise assumed" }] : []),
    ...(theilSen ? [{ name: "Theil–Sen", slope: theilSen.slopePerDay, u: null, lower: theilSen.lower, upper: theilSen.upper, note: "Kendall’s interval" }] : []),
  ];
  return (
    <div className="table-box">
      <table className="data-table" aria-label="Slopes">
        <thead><tr><th scope="col">By</th><th scope="col" className="right">Slope / {unit ? `(${unit}/d)` : "(1/d)"}</th><th scope="col" className="right">95 % from</th><th scope="col" className="right">to</th><th scope="col" /></tr></thead>
        <tbody>
          {rows.map(({ name, slope, u: own, lower: low, upper: high, note }) => (
            <tr key={name}>
              <td>{name}</td>
              <td className="right num">{slope === null ? NO_VALUE : own === null ? inThree(slope * scale) : formatUncertain(slope * scale, own * scale, { signed: true })}</td>
              <td className="right num">{low === null ? NO_VALUE : inThree(low * scale)}</td>
              <td className="right num">{high === null ? NO_VALUE : inThree(high * scale)}</td>
              <td className="text-ink2">{note}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

export function StepTable({ drift: { steps, n }, shown: { scale, unit }, zone, now }: TableProps & { zone: string; now: string }) {
  if (steps.length === 0) return <p className="text-ink2">{n < 8 ? "Steps are looked for from eight phase values on." : "None stands out of the noise."}</p>;
  return (
    <table className="data-table" aria-label="Steps">
      <thead><tr><th scope="col">First phase after it</th><th scope="col" className="right">Size{unit && ` / ${unit}`}</th></tr></thead>
      <tbody>
        {steps.map(({ at, size, u }) => (
          <tr key={at}><td>{formatDayTime(at, zone, now)}</td><td className="right num">{formatUncertain(size * scale, u * scale, { signed: true })}</td></tr>
        ))}
      </tbody>
    </table>
  );
}

/** Mann–Kendall, and logarithmic ageing against a straight line, in words. */
export function AgeingAndTrend({ drift: { mannKendall, ageing }, shown: { scale, unit } }: TableProps) {
  const p = mannKendall && (mannKendall.exactP ?? mannKendall.p);
  const unitText = unit ? `\u00a0${unit}` : "";
  return (
    <div className="max-w-[60em]">
      {mannKendall && p != null && (
        <p>
          Mann–Kendall: τ = {formatNumber(mannKendall.tau, { decimals: 2, signed: true })}, p {p < 0.001 ? "below 0.001" : `= ${formatNumber(p, { decimals: 3 })}`}
          {mannKendall.exactP === null ? "" : " (exact)"}; it assumes values without memory, so flicker and random walk pass for a trend.
        </p>
      )}
      <p className="mt-2">
        {ageing
          ? ageing.preferred === "ageing"
            ? `Logarithmic ageing fits better than a line: ${formatNumber(Number((ageing.b * scale).toPrecision(3)), { signed: true })}${unitText} for each e-fold of 1 + t/τ, τ = ${formatDuration(ageing.tauDays * 86_400)} (AICc ${formatNumber(ageing.aiccDifference, { decimals: 1, signed: true })}${ageing.aiccDifference > -4 ? ", not clearly" : ""}).`
            : `A straight line serves as well as logarithmic ageing (AICc of ageing ${formatNumber(ageing.aiccDifference, { decimals: 1, signed: true })}).`
          : "Ageing is told from a straight line from eight phase values on."}
      </p>
    </div>
  );
}
