import type { CompensationAnswer } from "@/lib/analysis/schema";
import { temperatureCoefficient, type TemperatureFit } from "@/lib/numerics/temperature/temperature-coefficient";

/** A phase value with the thermometer's mean over its phase. */
export type AtTemperature = { at: Date; value: number; temperatureC: number; temperatureU: number | null; mountId: string | null; setPointC: number | null };

export type TemperatureOf = { answer: CompensationAnswer; fit?: TemperatureFit };

const DAY_MS = 86_400_000;
/** More values than these go in as means of neighbours. */
const MOST_VALUES = 3000;

/**
 * The temperature coefficient of phase values by rising time, fitted together with their drift and a free level at each re-mount;
 * at the set-point where there is one, else at the mean temperature. Without a fit the answer says why.
 */
export function temperatureOf(all: readonly AtTemperature[]): TemperatureOf {
  const phases = inMeans(all);
  const n = phases.length;
  if (n < 12) return none(n, `A temperature coefficient needs at least 12 phase values with a temperature; there ${n === 1 ? "is 1" : `are ${n}`}`);
  const [{ at: first, setPointC }] = phases;
  const referenceC = setPointC !== null && phases.every((phase) => phase.setPointC === setPointC) ? setPointC : phases.reduce((sum, { temperatureC }) => sum + temperatureC / n, 0);
  const temperatureU = phases.every((phase) => phase.temperatureU !== null) ? Float64Array.from(phases, (phase) => phase.temperatureU as number) : undefined;
  const found = temperatureCoefficient({
    atDays: Float64Array.from(phases, ({ at }) => (at.getTime() - first.getTime()) / DAY_MS),
    values: Float64Array.from(phases, ({ value }) => value),
    temperatureC: Float64Array.from(phases, ({ temperatureC }) => temperatureC),
    temperatureU,
    referenceC,
    steps: phases.flatMap(({ mountId }, i) => (i > 0 && mountId !== phases[i - 1].mountId ? [i] : [])),
  });
  if (!found) return none(n, "The temperature of the phases does not vary beyond drift and re-mounts, so no coefficient can be told");
  const { preferred, candidates, attenuation } = found;
  // Whoever asks for a compensation gets the best of those that compensate; where AICc would do without, the answer says so.
  const fit = preferred.model === "none" ? candidates.filter(({ model }) => model !== "none").reduce((one, other) => (other.aicc < one.aicc ? other : one)) : preferred;
  const doubt = preferred.model === "none" ? "; by AICc the values do without a temperature coefficient" : "";
  const { model, terms, driftPerDay, driftU } = fit;
  return {
    fit,
    answer: {
      applied: true,
      model,
      referenceC,
      terms: terms.map((term) => ({ ...term })),
      driftPerDay,
      driftU,
      attenuation: Number.isFinite(attenuation) ? attenuation : null,
      n,
      used: `brought to ${Number(referenceC.toFixed(4))} °C with a ${model} coefficient from ${n} ${n < all.length ? "means of phase values" : "phase values"}, fitted together with their drift${doubt}`,
    },
  };
}

const none = (n: number, used: string): TemperatureOf => ({
  answer: { applied: false, model: null, referenceC: null, terms: [], driftPerDay: null, driftU: null, attenuation: null, n, used },
});

/** Neighbours of one mount in groups of equal size, so that there are no more than can be fitted together. */
function inMeans(phases: readonly AtTemperature[]): AtTemperature[] {
  const size = Math.ceil(phases.length / MOST_VALUES);
  if (size <= 1) return [...phases];
  const groups: AtTemperature[][] = [];
  for (const phase of phases) {
    const group = groups[groups.length - 1];
    if (group && group.length < size && group[0].mountId === phase.mountId) group.push(phase);
    else groups.push([phase]);
  }
  return groups.slice(0, MOST_VALUES).map((group) => {
    const mean = (of: (phase: AtTemperature) => number) => group.reduce((sum, phase) => sum + of(phase) / group.length, 0);
    return {
      ...group[0],
      at: new Date(mean(({ at }) => at.getTime())),
      value: mean(({ value }) => value),
      temperatureC: mean(({ temperatureC }) => temperatureC),
      temperatureU: group.some(({ temperatureU }) => temperatureU === null) ? null : mean(({ temperatureU }) => temperatureU as number) / Math.sqrt(group.length),
    };
  });
}
