import type { GlsFit } from "@/lib/numerics/drift/gls-fit";
import { jointProblem, type JointProblem } from "@/lib/numerics/drift/joint-problem";
import { leastBetween } from "@/lib/numerics/statistics/least-between";
import { attenuation } from "@/lib/numerics/temperature/attenuation";
import { laggedPhaseTemperature, phaseTemperature, type PhaseWindows, type ThermometerHistory } from "@/lib/numerics/temperature/lagged-temperature";

export type TemperatureModel = "none" | "linear" | "quadratic" | "linear with lag" | "quadratic with lag";

export type TemperatureFit = {
  model: TemperatureModel;
  /** Coefficients at `referenceC`: values per K, per K², and the lag in days; those of the model, in this order. */
  terms: readonly { name: "linear" | "quadratic" | "lag"; value: number; u: number }[];
  /** Of the terms, rows one after another. */
  covariance: Float64Array;
  referenceC: number;
  driftPerDay: number;
  driftU: number;
  aicc: number;
};

export type TemperatureCoefficient = {
  /** Of least AICc. */
  preferred: TemperatureFit;
  /** Every model tried, simplest first. */
  candidates: readonly TemperatureFit[];
  /** Mean exponent of the noise about the preferred model. */
  alpha: number;
  /** Share by which the thermometer's own scatter makes the linear coefficient too small; NaN where not stated. */
  attenuation: number;
  n: number;
};

/** Fewest values with which AICc can tell the richest model from the poorest. */
const fewestValues = 12;

export type TemperatureSeries = {
  atDays: Float64Array;
  values: Float64Array;
  temperatureC: Float64Array;
  temperatureU?: Float64Array;
  referenceC: number;
  lag?: { history: ThermometerHistory; windows: PhaseWindows };
  steps?: readonly number[];
};

/**
 * Temperature coefficient of phase values, fitted together with a drift line so that neither steals from the other:
 *
 *   y = a + d t + b₁ θ + b₂ θ², θ = sensor temperature − reference
 *
 * without temperature, linear, quadratic, and each with the sensor lagging behind the thermometer (first order, τ fitted
 * together); chosen by AICc. Noise is of unknown kind (`noiseKinds`), so standard errors hold under white,
 * flicker and random walk noise.
 *
 * Errors of the thermometer. A common offset does not touch the coefficient. Scatter of its phase means makes b₁ too
 * small; the share s = u² tr M / θᵀMθ, with M the weights of the fit after drift and steps, is returned, and b₁ s/(1 − s)
 * enters the uncertainty of b₁ as a bias that is not corrected; with s near 1 nothing can be said.
 *
 * @param atDays Times of the phases in days, rising.
 * @param values Phase values, one per time.
 * @param temperatureC Thermometer's mean over each phase, °C.
 * @param temperatureU Its standard uncertainty from scatter, K; what is common to all phases left out.
 * @param referenceC Temperature at which the coefficients are given, °C.
 * @param lag Readings and the phases' windows; without them no lag is tried.
 * @param steps Places of the first value after a known step of the level: a re-mount, or as found by `findSteps`.
 * @returns Undefined below twelve values, or where temperature does not vary beyond drift and steps. Of more than 300
 *   values at most 300 share a level: between such stretches the level is free.
 * @throws RangeError if lengths differ, times do not rise, a value is not finite, there are more than 3 000 values, or a
 *   step is no place between two values.
 *
 * Sources: as `glsFit`; scatter in a regressor, W. A. Fuller, Measurement Error Models (1987), section 1.1, and its use
 * as an uncertainty, JCGM 100:2008, F.2.4.5. Lag limits, half the shortest phase spacing to a quarter of the record, are
 * our choice.
 */
export function temperatureCoefficient(input: TemperatureSeries): TemperatureCoefficient | undefined {
  const { temperatureU, referenceC, temperatureC, lag } = input;
  const problem = jointProblem(input);
  const n = temperatureC.length;
  if (n < fewestValues) return undefined;
  const theta = temperatureC.map((value) => value - referenceC);
  if (!problem.varies([theta])) return undefined;

  const candidates = [fitted(problem, "none", []), fitted(problem, "linear", [theta])];
  const isCurved = problem.varies([theta, squared(theta)]);
  if (isCurved) candidates.push(fitted(problem, "quadratic", [theta, squared(theta)]));
  if (lag) {
    const search = { problem, referenceC, lag };
    for (const found of [fittedWithLag(search, false), isCurved ? fittedWithLag(search, true) : undefined]) if (found) candidates.push(found);
  }
  const best = candidates.reduce((one, other) => (other.fit.aicc < one.fit.aicc ? other : one));
  const share = temperatureU ? attenuation({ problem, whitener: best.fit.likeliest, theta, u: temperatureU }) : NaN;
  const widened = candidates.map(({ fit, model, lagDays }) => presented({ fit, model, lagDays, referenceC, share }));
  return { preferred: widened[candidates.indexOf(best)], candidates: widened, alpha: best.fit.alpha, attenuation: share, n };
}

type Candidate = { fit: GlsFit; model: TemperatureModel; lagDays?: number };

function fitted(problem: JointProblem, model: TemperatureModel, temperature: readonly Float64Array[]): Candidate {
  return { model, fit: problem.fit(temperature) };
}

/** Undefined where the best lag lies at an end of what can be told, or is not told apart from the coefficients. */
function fittedWithLag(
  { problem, referenceC, lag }: { problem: JointProblem; referenceC: number; lag: NonNullable<TemperatureSeries["lag"]> },
  isQuadratic: boolean,
): Candidate | undefined {
  const polynomialOf = (theta: Float64Array) => (isQuadratic ? [theta, squared(theta)] : [theta]);
  const thetaOf = (sensorC: Float64Array) => sensorC.map((value) => value - referenceC);
  const misfitAt = (logLag: number) => problem.misfit(polynomialOf(thetaOf(laggedPhaseTemperature(lag.history, lag.windows, Math.exp(logLag)))));
  const [low, high] = [Math.log(problem.shortestDays / 2), Math.log(problem.spanDays / 4)];
  const logLag = leastBetween(misfitAt, { low, high, gridPoints: 24, width: 1e-4 });
  if (logLag - low < 0.01 || high - logLag < 0.01 || misfitAt(logLag) === Infinity) return undefined;

  const lagDays = Math.exp(logLag);
  const { sensorC, perLagDay } = phaseTemperature(lag.history, lag.windows, lagDays);
  const theta = thetaOf(sensorC);
  const polynomial = polynomialOf(theta);
  const at = problem.fit(polynomial, { extraUnknowns: 1 });
  const [b1, b2 = 0] = at.coefficients.subarray(problem.shared);
  const tangent = perLagDay.map((value, i) => value * (b1 + 2 * b2 * theta[i]));
  if (!problem.varies([...polynomial, tangent])) return undefined;
  const { covariance } = problem.fit([...polynomial, tangent]);
  return { model: isQuadratic ? "quadratic with lag" : "linear with lag", fit: { ...at, covariance }, lagDays };
}

/** Coefficients beside drift and steps, the doubt from the thermometer's scatter put into that of the linear one. */
function presented({
  fit,
  model,
  lagDays,
  referenceC,
  share,
}: Candidate & { referenceC: number; share: number }): TemperatureFit {
  const size = Math.round(Math.sqrt(fit.covariance.length));
  const names = termNames[model];
  const first = size - names.length;
  const covariance = Float64Array.from({ length: names.length ** 2 }, (_, at) => {
    const [i, j] = [Math.floor(at / names.length), at % names.length];
    const bias = at === 0 && share > 0 ? (fit.coefficients[first] * share) / Math.max(0, 1 - share) : 0;
    return fit.covariance[(first + i) * size + first + j] + bias ** 2;
  });
  return {
    model,
    terms: names.map((name, i) => ({
      name,
      value: name === "lag" ? (lagDays ?? NaN) : fit.coefficients[first + i],
      u: Math.sqrt(covariance[i * (names.length + 1)]),
    })),
    covariance,
    referenceC,
    driftPerDay: fit.coefficients[0],
    driftU: Math.sqrt(fit.covariance[0]),
    aicc: fit.aicc,
  };
}

const termNames: Readonly<Record<TemperatureModel, readonly ("linear" | "quadratic" | "lag")[]>> = {
  none: [],
  linear: ["linear"],
  quadratic: ["linear", "quadratic"],
  "linear with lag": ["linear", "lag"],
  "quadratic with lag": ["linear", "quadratic", "lag"],
};

const squared = (theta: Float64Array) => theta.map((value) => value ** 2);
