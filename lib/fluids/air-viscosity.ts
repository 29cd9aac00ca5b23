import { requireRange } from "./fluid-range-error";

const molarMass = 28.9586;
const collision = [0.431, -0.4623, 0.08406, 0.005341, -0.00331];
const N = [10.72, 1.122, 0.002019, -8.876, -0.02916];
const tExponent = [0.2, 0.05, 2.4, 0.6, 3.6];
const dExponent = [1, 4, 9, 1, 8];
const damped = [0, 0, 0, 1, 1];

/**
 * Dynamic viscosity of dry air.
 *
 *   η = η₀(T) + ηᵣ(τ, δ),  η₀ = 0.0266958 √(MT) / (σ² Ω(T/103.3 K)),  σ = 0.360 nm
 *   ηᵣ = Σ Nᵢ τ^tᵢ δ^dᵢ exp(−γᵢ δ^lᵢ),  τ = 132.6312 K/T, δ = ρ/10.4477 mol/dm³   in µPa·s
 *
 * @param state temperatureC −200 to 1700 °C; densityKgM3 the air's density, 0 (dilute gas) unless given; at most 1000.
 * @returns η in mPa·s. At room conditions the second term adds 0.08 %; uncertainty 0.5 to 1 %. Humidity is not
 *   considered (below 0.3 % at 20 °C).
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Source: Lemmon, Jacobsen, Int. J. Thermophys. 25 (2004) 21, equations (1) to (3).
 */
export function airViscosity({ temperatureC, densityKgM3 = 0 }: { temperatureC: number; densityKgM3?: number }): number {
  requireRange("Viscosity of air", "temperature / °C", temperatureC, -200, 1700);
  requireRange("Viscosity of air", "density / kg/m³", densityKgM3, 0, 1000);
  const T = temperatureC + 273.15;
  const lnReduced = Math.log(T / 103.3);
  let lnOmega = 0;
  for (let i = 4; i >= 0; i--) lnOmega = lnOmega * lnReduced + collision[i];
  const dilute = (0.0266958 * Math.sqrt(molarMass * T)) / (0.36 ** 2 * Math.exp(lnOmega));

  const tau = 132.6312 / T;
  const delta = densityKgM3 / (molarMass * 1e-3) / 10447.7;
  let residual = 0;
  for (let i = 0; i < 5; i++) residual += N[i] * tau ** tExponent[i] * delta ** dExponent[i] * (damped[i] ? Math.exp(-delta) : 1);
  return (dilute + residual) / 1000;
}
