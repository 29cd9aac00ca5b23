import { beamEigenvalue, beamFrequency } from "./beam";
import type { Fluid, Resonance } from "./immersed";

/** A clamped tube with the fluid inside. */
export type Tube = {
  lengthM: number;
  innerRadiusM: number;
  outerRadiusM: number;
  modulusPa: number;
  wallDensityKgM3: number;
  intrinsicQ: number;
};

/** ∫w′² / ∫w² · L² of the first clamped-clamped mode. */
const slopeIntegral = 12.3026;

/**
 * Resonance of a fluid-filled tube, first clamped-clamped mode.
 *
 * The fluid moves with the tube; only the tilt of its cross-sections shears a layer of thickness δ = √(2η/ρω) along the wall. With
 * the wall's axial speed ωRw′cos θ the layer carries, per length, the mass m = ½πρδR³⟨w′²⟩/⟨w²⟩ and as much loss:
 *
 *   f = (βL)²/(2πL²) · √(EI/(μ + ρπR² + m)),  1/Q = m/(μ + ρπR² + m) + 1/Q₀
 *
 * @param tube Geometry in m, Young's modulus in Pa, wall density in kg/m³.
 * @param fluid Density in kg/m³, viscosity in mPa·s; the layer must be thin against the radius.
 * @returns Undamped natural frequency in Hz and quality factor.
 *
 * Source: Euler–Bernoulli beam; Stokes' layer of an oscillating plane, Landau, Lifshitz, Fluid Mechanics, § 24.
 */
export function tubeResonance(tube: Tube, fluid: Fluid): Resonance {
  const { innerRadiusM: inner, outerRadiusM: outer } = tube;
  const wall = tube.wallDensityKgM3 * Math.PI * (outer ** 2 - inner ** 2);
  const content = fluid.densityKgM3 * Math.PI * inner ** 2;
  const stiffnessNm2 = (tube.modulusPa * Math.PI * (outer ** 4 - inner ** 4)) / 4;
  const eigenvalue = beamEigenvalue("clamped-clamped");
  const frequencyWith = (massPerLengthKgM: number): number =>
    beamFrequency({ lengthM: tube.lengthM, stiffnessNm2, massPerLengthKgM, eigenvalue });

  let f = frequencyWith(wall + content);
  let layer = 0;
  for (let i = 0; i < 6; i++) {
    const depth = Math.sqrt((fluid.viscosityMPaS * 1e-3) / (Math.PI * fluid.densityKgM3 * f));
    layer = (0.5 * Math.PI * fluid.densityKgM3 * depth * inner ** 3 * slopeIntegral) / tube.lengthM ** 2;
    f = frequencyWith(wall + content + layer);
  }
  return { f0Hz: f, q: 1 / (layer / (wall + content + layer) + 1 / tube.intrinsicQ) };
}
