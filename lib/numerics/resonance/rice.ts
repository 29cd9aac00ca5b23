/**
 * Mean of the modulus of a complex number with Gaussian noise (Rice's distribution).
 *
 *   E|ν + noise| = σ√(π/2)·e^(−q/2)·[(1 + q)·I0(q/2) + q·I1(q/2)],  q = ν²/2σ²
 *
 * @param nu True modulus, ≥ 0.
 * @param sigma Noise of each quadrature, in the same unit, ≥ 0; with 0 the mean is ν itself.
 * @returns Relative error below 1e-6.
 *
 * Source: Rice, Bell System Technical Journal 24 (1945) 46, §3.10; Bessel functions from Abramowitz & Stegun 9.8.1–9.8.4.
 */
export function riceMean(nu: number, sigma: number): number {
  if (sigma === 0) return nu;
  const half = (nu * nu) / (4 * sigma * sigma);
  if (half > 100) return nu + ((sigma * sigma) / (2 * nu)) * (1 + (sigma * sigma) / (4 * nu * nu));
  return sigma * Math.sqrt(Math.PI / 2) * ((1 + 2 * half) * scaledI0(half) + 2 * half * scaledI1(half));
}

/** Derivative of riceMean with respect to ν: from 0 at ν = 0 to 1. */
export function riceSlope(nu: number, sigma: number): number {
  if (sigma === 0) return 1;
  const half = (nu * nu) / (4 * sigma * sigma);
  if (half > 100) return 1 - (sigma * sigma) / (2 * nu * nu);
  return Math.sqrt(Math.PI / 8) * (nu / sigma) * (scaledI0(half) + scaledI1(half));
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
