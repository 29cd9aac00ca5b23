const FINEST = 0.02;
const FARTHEST = 12;
let table: Float64Array | undefined;

/**
 * What one modulus |ν + noise| tells of ν² (Rice's distribution), against 1/4σ⁴.
 *
 *   h(r) = (E[y²·(I1(ry)/I0(ry))²] − r²)/r²,   r = ν/σ,   y = |ν + noise|/σ
 *
 * So the Fisher information of ν is h·ν²/σ⁴: 1/σ² far above the noise, where h → 1/r², and vanishing with ν, where h = 1.
 *
 * @param r ν/σ, ≥ 0; finite.
 * @returns Within 3e-4 of its value, interpolated from a table that the first call fills; beyond r = 12 from the expansion (1 − 1/2r²)/r².
 *
 * Source: Fisher information as the variance of the score, Kay, Estimation Theory (1993), §3.4, of the density of Rice, Bell System Technical
 * Journal 24 (1945) 46, eq. 3.10-11; Bessel functions from Abramowitz & Stegun 9.8.1–9.8.4.
 */
export function riceInformation(r: number): number {
  if (r >= FARTHEST) return (1 - 1 / (2 * r * r)) / (r * r);
  table ??= Float64Array.from({ length: FARTHEST / FINEST + 2 }, (_, i) => (i === 0 ? 1 : integrated(i * FINEST)));
  const place = r / FINEST;
  const i = Math.floor(place);
  return table[i] + (place - i) * (table[i + 1] - table[i]);
}

/** By the trapezoidal rule, which for a smooth density over its whole width has no error to speak of. */
function integrated(r: number): number {
  const from = Math.max(0, r - 8);
  const points = 400;
  const step = (r + 8 - from) / points;
  let sum = 0;
  for (let i = 0; i <= points; i++) {
    const y = from + i * step;
    const even = scaledI0(r * y);
    const density = y * Math.exp(-0.5 * (y - r) ** 2) * even;
    sum += density * (y * (scaledI1(r * y) / even)) ** 2;
  }
  return (sum * step) / (r * r) - 1;
}

function polynomial(coefficients: readonly number[], t: number): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 0; i--) sum = sum * t + coefficients[i];
  return sum;
}

const I0_SMALL = [1, 3.5156229, 3.0899424, 1.2067492, 0.2659732, 0.0360768, 0.0045813];
const I0_LARGE = [0.39894228, 0.01328592, 0.00225319, -0.00157565, 0.00916281, -0.02057706, 0.02635537, -0.01647633, 0.00392377];
const I1_SMALL = [0.5, 0.87890594, 0.51498869, 0.15084934, 0.02658733, 0.00301532, 0.00032411];
const I1_LARGE = [0.39894228, -0.03988024, -0.00362018, 0.00163801, -0.01031555, 0.02282967, -0.02895312, 0.01787654, -0.00420059];

/** e^(−x)·I0(x), x ≥ 0. */
function scaledI0(x: number): number {
  if (x < 3.75) return Math.exp(-x) * polynomial(I0_SMALL, (x / 3.75) ** 2);
  return polynomial(I0_LARGE, 3.75 / x) / Math.sqrt(x);
}

/** e^(−x)·I1(x), x ≥ 0. */
function scaledI1(x: number): number {
  if (x < 3.75) return Math.exp(-x) * x * polynomial(I1_SMALL, (x / 3.75) ** 2);
  return polynomial(I1_LARGE, 3.75 / x) / Math.sqrt(x);
}
