import { stokesDrag } from "./stokes";

export type Fluid = { densityKgM3: number; viscosityMPaS: number };

export type Resonance = { f0Hz: number; q: number };

/** A body that moves in the fluid. For a solid rod `bodyDensityKgM3` is its density; a body that pushes more fluid than its own volume has a lower one. */
export type ImmersedBody = {
  radiusM: number;
  bodyDensityKgM3: number;
  vacuumHz: number;
  /** Quality factor of losses in the body and its clamps. */
  intrinsicQ: number;
};

/**
 * Resonance of a wire or rod in a fluid: added mass and drag at the resonance itself.
 *
 *   f²(1 + (ρ/ρₛ)k(Re(f))) = f_vac²,  1/Q = k′/(ρₛ/ρ + k) + 1/Q₀,  Re = 2πfρR²/η
 *
 * @param body Geometry and values in vacuum, SI units.
 * @param fluid Density in kg/m³, viscosity in mPa·s.
 * @returns Undamped natural frequency in Hz and quality factor.
 */
export function immersedResonance(body: ImmersedBody, fluid: Fluid): Resonance {
  const { densityKgM3: rho } = fluid;
  const perHz = (2 * Math.PI * rho * body.radiusM ** 2) / (fluid.viscosityMPaS * 1e-3);
  const massRatio = rho / body.bodyDensityKgM3;
  let f = body.vacuumHz / Math.sqrt(1 + massRatio);
  let drag = stokesDrag(perHz * f);
  for (let i = 0; i < 60; i++) {
    const next = body.vacuumHz / Math.sqrt(1 + massRatio * drag.k);
    const change = Math.abs(next - f);
    f = next;
    drag = stokesDrag(perHz * f);
    if (change < 1e-13 * f) break;
  }
  return { f0Hz: f, q: 1 / (drag.kPrime / (1 / massRatio + drag.k) + 1 / body.intrinsicQ) };
}
