/** A complex number as a pair. */
type Complex = { re: number; im: number };

/**
 * Force of a viscous fluid on a long cylinder that oscillates across its axis: Stokes' k and k′.
 *
 *   Γ = k + ik′ = 1 + 4i K₁(z) / (√(iRe) K₀(z)),  z = √Re · e^(−iπ/4),  Re = ρωR²/η
 *
 * Real part: added mass per displaced mass; imaginary part: drag. (Force per length = πρR²ω²Γx, time factor e^(−iωt).)
 * The ratio of the Bessel functions comes from their power series for |z| ≤ 2, from Steed's continued fraction above, which
 * neither overflows nor underflows.
 *
 * @param reynolds Re as above, from 10⁻⁶ to 10⁹; relative accuracy 10⁻¹⁰.
 * @throws RangeError outside.
 *
 * Source: G. G. Stokes, Trans. Camb. Phil. Soc. 9 (1851) 8; L. Rosenhead, Laminar Boundary Layers (1963).
 */
export function stokesDrag(reynolds: number): { k: number; kPrime: number } {
  if (!(reynolds >= 1e-6 && reynolds <= 1e9)) throw new RangeError(`Reynolds number ${reynolds} is outside 1e-6 to 1e9`);
  const modulus = Math.sqrt(reynolds);
  const z = { re: modulus * Math.SQRT1_2, im: -modulus * Math.SQRT1_2 };
  const ratio = modulus <= 2 ? ratioBySeries(z) : ratioByFraction(z, modulus);
  // 4i/√(iRe) = 4i · e^(−iπ/4)/√Re = 4 e^(iπ/4)/√Re
  const factor = { re: (4 * Math.SQRT1_2) / modulus, im: (4 * Math.SQRT1_2) / modulus };
  const product = multiply(factor, ratio);
  return { k: 1 + product.re, kPrime: product.im };
}

/** K₁(z)/K₀(z) by the power series about 0 (Abramowitz and Stegun 9.6.11, 9.6.13). */
function ratioBySeries(z: Complex): Complex {
  const quarter = multiply(z, z);
  quarter.re /= 4;
  quarter.im /= 4;
  const lnHalf = { re: 0.5 * Math.log((z.re * z.re + z.im * z.im) / 4), im: Math.atan2(z.im, z.re) };
  const eulerGamma = 0.5772156649015329;

  let term: Complex = { re: 1, im: 0 }; // (z²/4)ʲ / (j!)²
  let harmonic = 0;
  const i0 = { re: 0, im: 0 };
  const i1Half = { re: 0, im: 0 }; // I₁ / (z/2)
  const tail0 = { re: 0, im: 0 };
  const tail1 = { re: 0, im: 0 };
  for (let j = 0; j < 30; j++) {
    if (j > 0) {
      term = multiply(term, quarter);
      term.re /= j * j;
      term.im /= j * j;
      harmonic += 1 / j;
    }
    accumulate(i0, term, 1);
    accumulate(i1Half, term, 1 / (j + 1));
    accumulate(tail0, term, harmonic - eulerGamma);
    accumulate(tail1, term, (2 * (harmonic - eulerGamma) + 1 / (j + 1)) / (j + 1));
  }
  const logI0 = multiply(lnHalf, i0);
  const k0 = { re: tail0.re - logI0.re, im: tail0.im - logI0.im };
  const halfZ = { re: z.re / 2, im: z.im / 2 };
  const logI1 = multiply(lnHalf, multiply(halfZ, i1Half));
  const rest = multiply(halfZ, tail1);
  const inverse = divide({ re: 1, im: 0 }, z);
  const k1 = { re: inverse.re + logI1.re - rest.re / 2, im: inverse.im + logI1.im - rest.im / 2 };
  return divide(k1, k0);
}

/** K₁(z)/K₀(z) = [½ + z + a₁/(b₁ + a₂/(b₂ + …))]/z, aₙ = −(n − ½)², bₙ = 2(z + n), evaluated from the far end. */
function ratioByFraction(z: Complex, modulus: number): Complex {
  const terms = Math.ceil(12 + 180 / modulus);
  let fraction: Complex = { re: 0, im: 0 };
  for (let n = terms; n >= 1; n--) {
    const below = { re: 2 * (z.re + n) + fraction.re, im: 2 * z.im + fraction.im };
    fraction = divide({ re: -((n - 0.5) ** 2), im: 0 }, below);
  }
  return divide({ re: 0.5 + z.re + fraction.re, im: z.im + fraction.im }, z);
}

const multiply = (x: Complex, y: Complex): Complex => ({ re: x.re * y.re - x.im * y.im, im: x.re * y.im + x.im * y.re });

function divide(x: Complex, y: Complex): Complex {
  const square = y.re * y.re + y.im * y.im;
  return { re: (x.re * y.re + x.im * y.im) / square, im: (x.im * y.re - x.re * y.im) / square };
}

function accumulate(sum: Complex, term: Complex, factor: number): void {
  sum.re += term.re * factor;
  sum.im += term.im * factor;
}
