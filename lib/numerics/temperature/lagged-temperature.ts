/** Thermometer readings over a whole record, not only inside phases: a lagging sensor remembers what was between them. */
export type ThermometerHistory = { atDays: Float64Array; temperatureC: Float64Array };

/** From the first to the last repeat of each phase. */
export type PhaseWindows = { fromDays: Float64Array; toDays: Float64Array };

/**
 * Temperature of a body that follows a thermometer with a first-order lag.
 *
 *   τ dS/dt = T − S, S = T at the first reading
 *
 * solved exactly for a temperature that runs straight from reading to reading; a hole in the readings is bridged straight.
 *
 * @param history Readings in °C at times in days, rising, all finite.
 * @param lagDays τ in days, above 0.
 * @returns S in °C at each reading. Linear in the number of readings.
 * @throws RangeError if lengths differ, times do not rise, a value is not finite or τ is not above 0.
 */
export function laggedTemperature({ atDays, temperatureC }: ThermometerHistory, lagDays: number): Float64Array {
  if (atDays.length !== temperatureC.length) throw new RangeError("times and temperatures must be equally many");
  if (!(lagDays > 0 && lagDays < Infinity)) throw new RangeError(`a lag must be above 0, got ${lagDays}`);
  const sensor = new Float64Array(atDays.length);
  let behind = 0; // S − T
  for (let i = 0; i < atDays.length; i++) {
    if (i > 0) {
      const step = atDays[i] - atDays[i - 1];
      if (!(step > 0)) throw new RangeError(`times must rise, at reading ${i}`);
      const settled = (-lagDays * (temperatureC[i] - temperatureC[i - 1])) / step;
      behind = settled + (behind - settled) * Math.exp(-step / lagDays);
    }
    sensor[i] = temperatureC[i] + behind;
    if (!Number.isFinite(sensor[i])) throw new RangeError(`temperature ${i} is not finite`);
  }
  return sensor;
}

/**
 * Mean of a record inside each window, ends included; where a window holds no reading, the straight line between its
 * neighbours at the window's middle.
 *
 * @throws RangeError if the record is empty, windows are unequally many, or do not rise.
 */
export function windowMeans({ atDays, values }: { atDays: Float64Array; values: Float64Array }, { fromDays, toDays }: PhaseWindows): Float64Array {
  if (atDays.length === 0) throw new RangeError("there are no thermometer readings");
  if (fromDays.length !== toDays.length) throw new RangeError("windows must have a beginning and an end");
  let next = 0;
  return fromDays.map((from, k) => {
    if (!(toDays[k] >= from && (k === 0 || from >= fromDays[k - 1]))) throw new RangeError(`windows must rise, at ${k}`);
    while (next < atDays.length && atDays[next] < from) next++;
    let sum = 0;
    let end = next;
    for (; end < atDays.length && atDays[end] <= toDays[k]; end++) sum += values[end];
    return end > next ? sum / (end - next) : between(atDays, values, next, (from + toDays[k]) / 2);
  });
}

function between(atDays: Float64Array, values: Float64Array, upper: number, at: number): number {
  if (upper === 0) return values[0];
  if (upper === atDays.length) return values[upper - 1];
  const share = (at - atDays[upper - 1]) / (atDays[upper] - atDays[upper - 1]);
  return values[upper - 1] + share * (values[upper] - values[upper - 1]);
}

/** Mean sensor temperature of each phase, °C, under a lag of τ in days, above 0. */
export function laggedPhaseTemperature(history: ThermometerHistory, windows: PhaseWindows, lagDays: number): Float64Array {
  return windowMeans({ atDays: history.atDays, values: laggedTemperature(history, lagDays) }, windows);
}

/**
 * Sensor temperature of each phase under a lag, and how it moves with the lag.
 *
 * @param lagDays τ in days, above 0; without it the thermometer itself.
 * @returns `sensorC` in °C; `perLagDay` its derivative by τ in K per day, 0 without a lag.
 */
export function phaseTemperature(
  history: ThermometerHistory,
  windows: PhaseWindows,
  lagDays?: number,
): { sensorC: Float64Array; perLagDay: Float64Array } {
  const { atDays } = history;
  if (lagDays === undefined) {
    const sensorC = windowMeans({ atDays, values: history.temperatureC }, windows);
    return { sensorC, perLagDay: new Float64Array(sensorC.length) };
  }
  const under = (lag: number) => laggedPhaseTemperature(history, windows, lag);
  const step = 1e-3 * lagDays;
  const [below, above] = [under(lagDays - step), under(lagDays + step)];
  return { sensorC: under(lagDays), perLagDay: above.map((value, k) => (value - below[k]) / (2 * step)) };
}
