import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { fitRingDown } from "@/lib/numerics/resonance/fit-ring-down";
import type { FitFlag } from "@/lib/numerics/resonance/flags";
import { judgeGiven, type AskedSweep } from "@/lib/numerics/resonance/judge-given";
import type { Readout } from "@/lib/numerics/resonance/types";
import { decodeSweep, type StoredSweep } from "@/lib/readings/decode-sweep";
import type { FitSettings } from "@/models/json";

export type RecordFit = {
  f0Hz: number;
  q: number;
  f0StdHz: number;
  qStd: number;
  covarianceF0Q: number;
  amplitude: number;
  noise: number;
  flags: FitFlag[];
};

type Settings = { settings: FitSettings; readout: Readout; asked: AskedSweep | null };

/**
 * f0 and Q of one stored record, whichever form it has; values that a rig has fitted are taken as given, judged by the sweep it was
 * asked for, where it was asked for one: an imported value was not. What cannot be fitted is flagged `failed`, never thrown.
 */
export function fitRecord(stored: StoredSweep, { settings, readout, asked }: Settings): RecordFit {
  const record = decodeSweep(stored);
  if (record.form === "fitted") {
    return {
      f0Hz: record.f0Hz,
      q: record.q,
      f0StdHz: record.f0StdHz ?? NaN,
      qStd: record.qStd ?? NaN,
      covarianceF0Q: NaN,
      amplitude: record.amplitudeV ?? NaN,
      noise: NaN,
      flags: asked ? judgeGiven(record, asked) : record.f0Hz > 0 && record.q > 0 ? [] : ["failed"],
    };
  }
  const fit =
    record.form === "ringDown"
      ? fitRingDown({ sampleHz: record.sampleHz, startS: record.startS, volts: record.volts })
      : fitResonance(record.sweep, { readout: settings.readout ?? readout, dwellS: asked?.dwellS, offsetSlope: settings.offsetSlope });
  return {
    f0Hz: fit.f0Hz,
    q: fit.q,
    f0StdHz: fit.f0StdHz,
    qStd: fit.qStd,
    covarianceF0Q: fit.covariance.f0q,
    amplitude: fit.amplitude,
    noise: fit.noise,
    flags: fit.flags,
  };
}
