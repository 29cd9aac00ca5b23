import type { Compensated } from "@/lib/numerics/temperature/compensated";
import type { TemperatureFit } from "@/lib/numerics/temperature/temperature-coefficient";

/**
 * Values brought to the fit's reference temperature:
 *
 *   y − b₁ θ − b₂ θ², θ = sensor temperature − reference
 *
 * @param sensorC Sensor temperature at each value, °C: the thermometer's, or lagged as in the fit (`phaseTemperature`).
 * @param perLagDay Its derivative by the lag, K per day; needed where the fit has a lag.
 * @param sensorU Standard uncertainty of each temperature from scatter alone, K.
 * @param thermometerU Standard uncertainty of the thermometer common to all values, K: its calibration. 0 where the
 *   reference temperature is meant on this thermometer's own scale.
 * @returns In the unit of the values. Common sources: the coefficients, the lag, the thermometer's calibration.
 * @throws RangeError if lengths differ, or a lag has no derivative.
 */
export function compensateTemperature({
  values,
  fit,
  sensorC,
  perLagDay,
  sensorU,
  thermometerU = 0,
}: {
  values: Float64Array;
  fit: Pick<TemperatureFit, "terms" | "covariance" | "referenceC">;
  sensorC: Float64Array;
  perLagDay?: Float64Array;
  sensorU?: Float64Array;
  thermometerU?: number;
}): Compensated {
  if ([sensorC, perLagDay, sensorU].some((one) => one && one.length !== values.length)) {
    throw new RangeError("values and temperatures must be equally many");
  }
  const { terms, covariance, referenceC } = fit;
  const coefficient = (name: string) => terms.find((term) => term.name === name)?.value ?? 0;
  const [b1, b2] = [coefficient("linear"), coefficient("quadratic")];
  const theta = sensorC.map((value) => value - referenceC);
  const slope = theta.map((value) => b1 + 2 * b2 * value);

  const sensitivities = terms.map(({ name }) => {
    if (name === "linear") return theta.map((value) => -value);
    if (name === "quadratic") return theta.map((value) => -(value ** 2));
    if (!perLagDay) throw new RangeError("the fit has a lag: how temperature moves with it is needed");
    return slope.map((value, i) => -value * perLagDay[i]);
  });
  const size = terms.length + 1;
  const extended = new Float64Array(size * size);
  terms.forEach((_, i) => extended.set(covariance.subarray(i * terms.length, (i + 1) * terms.length), i * size));
  extended[size * size - 1] = thermometerU ** 2;
  return {
    values: values.map((value, i) => value - b1 * theta[i] - b2 * theta[i] ** 2),
    independentU: slope.map((value, i) => Math.abs(value) * (sensorU?.[i] ?? 0)),
    sources: [...terms.map(({ name }) => name), "thermometer"],
    sensitivities: [...sensitivities, slope.map((value) => -value)],
    covariance: extended,
  };
}
