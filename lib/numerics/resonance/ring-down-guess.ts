import { fft } from "@/lib/numerics/resonance/fft";
import type { Decay } from "@/lib/numerics/resonance/ring-down-model";

/**
 * Angle and decay per sample from the strongest line of the spectrum and its stronger neighbour: for a decaying tone
 * X[k] ∝ 1/(1 − ζ·e^(−2πik/n)) with ζ = e^(iω − γ), so two lines give ζ.
 *
 * @param longest Samples looked at, from the first on, at most; the power of two below is taken.
 *
 * Source: Bertocco et al., IEEE Trans. Instrum. Meas. 43 (1994) 245.
 */
export function decayGuess(y: Float64Array, longest: number): Decay {
  const n = 2 ** Math.floor(Math.log2(Math.min(y.length, longest)));
  const re = y.slice(0, n);
  const im = new Float64Array(n);
  const mean = re.reduce((sum, v) => sum + v, 0) / n;
  for (let i = 0; i < n; i++) re[i] -= mean;
  fft(re, im);
  const power = (k: number): number => re[k] * re[k] + im[k] * im[k];
  let peak = 1;
  for (let k = 2; k < n / 2; k++) if (power(k) > power(peak)) peak = k;
  const other = peak + 1 < n / 2 && (peak < 2 || power(peak + 1) > power(peak - 1)) ? peak + 1 : Math.max(peak - 1, 0);
  const unit = (k: number): [number, number] => [Math.cos((2 * Math.PI * k) / n), -Math.sin((2 * Math.PI * k) / n)];
  const [aR, aI] = unit(peak);
  const [bR, bI] = unit(other);
  const upR = re[peak] - re[other];
  const upI = im[peak] - im[other];
  const downR = re[peak] * aR - im[peak] * aI - (re[other] * bR - im[other] * bI);
  const downI = re[peak] * aI + im[peak] * aR - (re[other] * bI + im[other] * bR);
  const omega = Math.atan2(upI * downR - upR * downI, upR * downR + upI * downI);
  const gamma = -Math.log(Math.hypot(upR, upI) / Math.hypot(downR, downI));
  const line = (2 * Math.PI * peak) / n;
  const near = Math.abs(omega - line) < (4 * Math.PI) / n;
  return { omega: near ? omega : line, gamma: gamma > 0 && gamma < 1 ? gamma : 1 / n, bend: 0 };
}
