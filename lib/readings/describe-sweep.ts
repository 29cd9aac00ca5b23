import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { countInBand, DISTORTED_SIGMAS } from "@/lib/numerics/resonance/judge";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { parameterCovariance } from "@/lib/numerics/resonance/parameter-covariance";
import { RESONANCE_PARAMETERS, type FitOptions, type ResonanceFit, type Sweep } from "@/lib/numerics/resonance/types";
import type { Decoded } from "@/lib/readings/decode-sweep";
import type { SweepAnswer } from "@/lib/readings/schema";

type Described = Pick<SweepAnswer, "curve" | "parameters" | "judged">;

/** What a page shows of one sweep: measured and fitted curve, parameters with their uncertainties, and what flags are judged by. */
export function describeSweep(record: Decoded, options: FitOptions): Described {
  if (record.form !== "sweep") return { curve: null, parameters: [], judged: null };
  const { sweep } = record;
  const fit = fitResonance(sweep, options);
  const failed = fit.flags.includes("failed");
  const fitted = failed ? { re: new Float64Array(0), im: new Float64Array(0) } : evaluateResonance(sweep.frequencyHz, { readout: options.readout, f0Hz: fit.f0Hz, q: fit.q, a: fit.a, b: fit.b, c: fit.c });
  const complex = sweep.kind === "complex";
  return {
    curve: {
      frequencyHz: [...sweep.frequencyHz],
      measuredV: [...(complex ? magnitudes(sweep) : sweep.magnitude)],
      fittedV: [...magnitudes(fitted)],
      ...(complex && { re: [...sweep.re], im: [...sweep.im], fittedRe: [...fitted.re], fittedIm: [...fitted.im] }),
    },
    parameters: failed ? [] : parametersOf(sweep, fit, options),
    judged: failed ? null : judgedBy(sweep, fit, fitted, options.dwellS),
  };
}

const magnitudes = ({ re, im }: { re: Float64Array; im: Float64Array }) => re.map((value, i) => Math.hypot(value, im[i]));

function parametersOf(sweep: Sweep, fit: ResonanceFit, { readout, offsetSlope = true }: FitOptions): Described["parameters"] {
  const { f0Hz, q, a, b, c, f0StdHz, qStd, covariance: own } = fit;
  if (sweep.kind === "magnitude") {
    return [
      { name: "f0Hz", value: f0Hz, u: f0StdHz, correlationWithF0: 1 },
      { name: "q", value: q, u: qStd, correlationWithF0: f0StdHz > 0 && qStd > 0 ? own.f0q / (f0StdHz * qStd) : null },
    ];
  }
  const values = [f0Hz, q, a.re, a.im, b.re, b.im, ...(offsetSlope ? [c.re, c.im] : [])];
  const covariance = parameterCovariance(sweep.frequencyHz, fit, { readout, offsetSlope });
  const size = values.length;
  return values.map((value, j) => {
    const u = covariance ? Math.sqrt(covariance[j * (size + 1)]) : null;
    return { name: RESONANCE_PARAMETERS[j], value, u, correlationWithF0: j === 0 ? 1 : covariance && u ? covariance[j] / (u * Math.sqrt(covariance[0])) : null };
  });
}

/** Lag-1 correlation as the fit judges it: over both quadratures, in order of frequency. */
function judgedBy(sweep: Sweep, { f0Hz, q }: ResonanceFit, fitted: { re: Float64Array; im: Float64Array }, dwellS: number | undefined): Described["judged"] {
  const { frequencyHz } = sweep;
  const n = frequencyHz.length;
  const order = Array.from(frequencyHz.keys()).sort((i, j) => frequencyHz[i] - frequencyHz[j]);
  const modelled = magnitudes(fitted);
  const residual = order.map((i) => (sweep.kind === "complex" ? [sweep.re[i] - fitted.re[i], sweep.im[i] - fitted.im[i]] : [sweep.magnitude[i] - modelled[i], 0]));
  const squares = residual.reduce((sum, [re, im]) => sum + re ** 2 + im ** 2, 0);
  const products = residual.slice(1).reduce((sum, [re, im], i) => sum + re * residual[i][0] + im * residual[i][1], 0);
  const span = frequencyHz[order[n - 1]] - frequencyHz[order[0]];
  return {
    spanHalfWidths: (span * 2 * q) / f0Hz,
    pointsInBand: countInBand(frequencyHz, n, f0Hz, q),
    lag1: squares > 0 ? products / squares : 0,
    lag1Limit: DISTORTED_SIGMAS / Math.sqrt(n),
    dwellRingDowns: dwellS === undefined ? null : (dwellS * Math.PI * f0Hz) / q,
  };
}
