import type { CompensationAnswer, StabilityQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import type { Series } from "@/lib/analysis/stability-series";
import { temperatureOf } from "@/lib/analysis/temperature-of";
import { compensateTemperature } from "@/lib/numerics/temperature/compensate-temperature";

export type CompensatedSeries = {
  series: Series;
  compensation?: CompensationAnswer;
  /** How an error of each coefficient moves the values, and its standard uncertainty. */
  sources: { sensitivity: Float64Array; u: number }[];
};

type Given = { series: Series; phases: readonly SelectedPhase[]; quantity: StabilityQuery["quantity"] };

/** A series brought to one temperature by the coefficient that its phase values tell; what has no temperature is left out. */
export function compensatedSeries({ series, phases, quantity }: Given): CompensatedSeries {
  const known = phases.flatMap(({ role, startedAt, f0Mean, qMean, temperatureC, temperatureSd, n, mountId, setPointC }) => {
    const value = quantity === "f0" ? f0Mean : qMean;
    if (role === "check" || value === null || !startedAt || temperatureC === null) return [];
    return [{ at: startedAt, value, temperatureC, temperatureU: temperatureSd === null || !n ? null : temperatureSd / Math.sqrt(n), mountId, setPointC }];
  });
  const { fit, answer } = temperatureOf(known.filter(({ at }, i) => i === 0 || at > known[i - 1].at));
  const { temperatureC, values, readings } = series;
  if (!fit || !temperatureC) return { series, compensation: answer, sources: [] };

  const leftOut = series.leftOut.slice();
  let without = 0;
  for (let i = 0; i < leftOut.length; i++) {
    if (leftOut[i] || Number.isFinite(temperatureC[i])) continue;
    leftOut[i] = 1;
    without++;
  }
  const compensated = compensateTemperature({ values, fit, sensorC: temperatureC });
  const finite = (sensitivity: Float64Array) => sensitivity.map((one) => (Number.isFinite(one) ? one : 0));
  return {
    series: {
      ...series,
      leftOut,
      values: compensated.values,
      used: `${series.used}, ${answer.used}${without > 0 ? `, ${without} without a temperature left out` : ""}`,
      readings: readings && { ...readings, used: readings.used - without, reasons: { ...readings.reasons, ...(without > 0 && { "no value": (readings.reasons["no value"] ?? 0) + without }) } },
    },
    compensation: answer,
    sources: fit.terms.map(({ u }, j) => ({ sensitivity: finite(compensated.sensitivities[j]), u })),
  };
}
