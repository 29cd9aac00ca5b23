import { polynomial } from "./polynomial";
import { requireRange } from "./fluid-range-error";

const A = [
  998.20123, -192.9769495, 389.1238958, -1668.103923, 13522.15441, -88292.78388,
  306287.4042, -613838.1234, 747017.2998, -547846.1354, 223446.0334, -39032.85426,
];
const B = [
  -0.20618513, -0.0052682542, 3.6130013e-05, -3.8957702e-07, 7.169354e-09, -9.9739231e-11,
];
const C = [
  [
    0.1693443461530087, -10.46914743455169, 71.96353469546523, -704.7478054272792, 3924.090430035045, -12101.64659068747,
    22486.46550400788, -26055.62982188164, 18523.73922069467, -7420.201433430137, 1285.617841998974,
  ],
  [
    -0.0119301300505701, 0.2517399633803461, -2.170575700536993, 13.53034988843029, -50.29988758547014, 109.635566657757,
    -142.2753946421155, 108.043594285623, -44.14153236817392, 7.442971530188783,
  ],
  [
    -0.0006802995733503803, 0.01876837790289664, -0.2002561813734156, 1.02299296671922, -2.895696483903638, 4.810060584300675,
    -4.672147440794683, 2.458043105903461, -0.5411227621436812,
  ],
  [
    4.075376675622027e-06, -8.76305857347111e-06, 6.515031360099368e-06, -1.51578483698721e-06,
  ],
  [
    -2.788074354782409e-08, 1.345612883493354e-08,
  ],
];

export const ethanolWaterDensityRange = { minC: -20, maxC: 40 };

/**
 * Density of mixtures of ethanol and water, pure ethanol included.
 *
 *   ρ = Σ Aₖ pᵏ⁻¹ + Σ Bₖ (t − 20)ᵏ + Σᵢ Σₖ Cᵢₖ pᵏ (t − 20)ⁱ
 *
 * @param state temperatureC t in °C, −20 to 40; massFraction p of ethanol, 0 to 1.
 * @returns ρ in kg/m³; agreement with the tables 0.01 kg/m³. Temperature scale IPTS-68 and water of 1975: at p = 0 it is
 *   0.006 kg/m³ below `waterDensity` at 20 °C.
 * @throws FluidRangeError outside the range or for NaN.
 *
 * Whether the mixture is frozen is not checked.
 * Source: OIML R 22 (1975), International alcoholometric tables, general formula.
 */
export function ethanolWaterDensity({ temperatureC, massFraction: p }: { temperatureC: number; massFraction: number }): number {
  const { minC, maxC } = ethanolWaterDensityRange;
  requireRange("Density of ethanol and water", "temperature / °C", temperatureC, minC, maxC);
  requireRange("Density of ethanol and water", "mass fraction", p, 0, 1);
  const t = temperatureC - 20;
  let density = polynomial(A, p) + t * polynomial(B, t);
  for (let i = 0; i < C.length; i++) density += t ** (i + 1) * p * polynomial(C[i], p);
  return density;
}
