import { requireRange } from "./fluid-range-error";

const H = [1.67752, 2.20462, 0.6366564, -0.241605];

const Hij: readonly (readonly [i: number, j: number, h: number])[] = [
  [0, 0, 0.520094],
  [1, 0, 0.0850895],
  [2, 0, -1.08374],
  [3, 0, -0.289555],
  [0, 1, 0.222531],
  [1, 1, 0.999115],
  [2, 1, 1.88797],
  [3, 1, 1.26613],
  [5, 1, 0.120573],
  [0, 2, -0.281378],
  [1, 2, -0.906851],
  [2, 2, -0.772479],
  [3, 2, -0.489837],
  [4, 2, -0.25704],
  [0, 3, 0.161913],
  [1, 3, 0.257399],
  [0, 4, -0.0325372],
  [3, 4, 0.0698452],
  [4, 5, 0.00872102],
  [3, 6, -0.00435673],
  [5, 6, -0.000593264],
];

/**
 * Dynamic viscosity of water, liquid or steam, away from the critical point (whose enhancement is taken as 1).
 *
 *   η = η₀(T̄) · η₁(T̄, ρ̄),  T̄ = T/647.096 K,  ρ̄ = ρ/322 kg/m³
 *   η₀ = 100 √T̄ / Σ Hᵢ/T̄ⁱ,  η₁ = exp(ρ̄ Σᵢ (1/T̄ − 1)ⁱ Σⱼ Hᵢⱼ (ρ̄ − 1)ʲ)   in µPa·s
 *
 * @param state temperatureK 273.15 to 1173.15 K, densityKgM3 0 to 1300 kg/m³.
 * @returns η in mPa·s.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: IAPWS R12-08, equations (10) to (12). At laboratory pressure `waterViscosity` is the shorter way.
 */
export function waterViscosityGeneral({ temperatureK, densityKgM3 }: { temperatureK: number; densityKgM3: number }): number {
  requireRange("Viscosity of water", "temperature / K", temperatureK, 273.15, 1173.15);
  requireRange("Viscosity of water", "density / kg/m³", densityKgM3, 0, 1300);
  const t = temperatureK / 647.096;
  const r = densityKgM3 / 322;
  const dilute = (100 * Math.sqrt(t)) / (H[0] + H[1] / t + H[2] / t ** 2 + H[3] / t ** 3);
  let sum = 0;
  for (const [i, j, h] of Hij) sum += h * (1 / t - 1) ** i * (r - 1) ** j;
  return (dilute * Math.exp(r * sum)) / 1000;
}
