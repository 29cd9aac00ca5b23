export type Fluid = { densityKgM3: number; viscosityPaS: number };
/** `vacuumQ`: what its clamps leave of it without any fluid. */
export type Wire = { radiusM: number; densityKgM3: number; vacuumHz: number; vacuumQ: number };

/**
 * Resonance frequency and quality factor of a thin round wire that swings in a fluid at rest.
 *
 *   f₀ = f_vac / √(1 + (ρ/ρ_w) k),  1/Q = (ρ/ρ_w) k′ / (1 + (ρ/ρ_w) k) + 1/Q_vac,  k and k′ at Re = 2πf₀ρR²/η
 *
 * Small amplitudes, no wall near. The frequency is found by iteration.
 *
 * Source: G. G. Stokes (1851) for the drag on a swinging cylinder; J. E. Sader, J. Appl. Phys. 84, 64 (1998), eqs. 4 and 9
 * for its form as Γ.
 */
export function wireInFluid(wire: Wire, fluid: Fluid): { f0Hz: number; q: number } {
  const ratio = fluid.densityKgM3 / wire.densityKgM3;
  let f0Hz = wire.vacuumHz;
  for (let turn = 0; turn < 200; turn++) {
    const { k } = stokesDrag((2 * Math.PI * f0Hz * fluid.densityKgM3 * wire.radiusM ** 2) / fluid.viscosityPaS);
    const next = wire.vacuumHz / Math.sqrt(1 + ratio * k);
    if (Math.abs(next - f0Hz) < 1e-12 * f0Hz) break;
    f0Hz = next;
  }
  const { k, kPrime } = stokesDrag((2 * Math.PI * f0Hz * fluid.densityKgM3 * wire.radiusM ** 2) / fluid.viscosityPaS);
  return { f0Hz, q: 1 / ((ratio * kPrime) / (1 + ratio * k) + 1 / wire.vacuumQ) };
}

/**
 * Added mass k and drag k′ of a swinging cylinder, both per displaced mass of fluid:
 * Γ = 1 + 4 K₁(z) / (z K₀(z)) with z = √(i Re), k = Re Γ, k′ = −Im Γ.
 */
function stokesDrag(re: number): { k: number; kPrime: number } {
  const root = Math.sqrt(re / 2); // z = root · (1 + i)
  const [k0Re, k0Im] = besselK(0, root, root);
  const [k1Re, k1Im] = besselK(1, root, root);
  const nRe = 4 * k1Re;
  const nIm = 4 * k1Im;
  const dRe = root * (k0Re - k0Im);
  const dIm = root * (k0Re + k0Im);
  const square = dRe * dRe + dIm * dIm;
  return { k: 1 + (nRe * dRe + nIm * dIm) / square, kPrime: (nRe * dIm - nIm * dRe) / square };
}

/** Kₙ(x + iy)·e^(x+iy) for x > 0, n = 0 or 1: ∫₀^∞ e^(−z (cosh t − 1)) cosh(nt) dt by the trapezoidal rule, which is exact to rounding here. */
function besselK(n: 0 | 1, x: number, y: number): readonly [number, number] {
  const step = 1 / 128;
  let re = 0.5;
  let im = 0;
  for (let t = step; ; t += step) {
    const rise = Math.cosh(t) - 1;
    const size = Math.exp(-x * rise) * (n === 0 ? 1 : Math.cosh(t));
    if (size < 1e-18) break;
    re += size * Math.cos(y * rise);
    im -= size * Math.sin(y * rise);
  }
  return [re * step, im * step];
}
