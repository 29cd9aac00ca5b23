import { propertiesAt, type StoredModel } from "@/lib/liquids/property-model";
import type { LotAnswer } from "@/lib/liquids/schema";

/** k of a 95 % band of a normal distribution, rounded as laboratories do. */
const COVERAGE = 2;

export type CurvePoint = { x: number; y: number; low?: number; high?: number };

/** Standard uncertainties that the model states; null where it states none. */
export type Stated = { minC: number; maxC: number; uDensityKgM3: number | null; uViscosityPercent: number | null };

/**
 * Density in kg/m³ and viscosity in mPa·s over the range of a liquid's model, with the 95 % band (k = 2) of its stated uncertainty.
 * Ends of the range are points of both curves; where the model has no value there is no point.
 */
export function propertyCurves(liquid: StoredModel, { minC, maxC, uDensityKgM3, uViscosityPercent }: Stated, points = 121): { density: CurvePoint[]; viscosity: CurvePoint[] } {
  const density: CurvePoint[] = [];
  const viscosity: CurvePoint[] = [];
  for (let i = 0; i < points; i++) {
    const x = i === points - 1 ? maxC : minC + ((maxC - minC) * i) / (points - 1);
    const at = propertiesAt(liquid, x);
    if (!at) continue;
    density.push(banded(x, at.densityKgM3, uDensityKgM3));
    viscosity.push(banded(x, at.viscosityMPaS, uViscosityPercent === null ? null : (at.viscosityMPaS * uViscosityPercent) / 100));
  }
  return { density, viscosity };
}

const banded = (x: number, y: number, u: number | null): CurvePoint => (u === null ? { x, y } : { x, y, low: y - COVERAGE * u, high: y + COVERAGE * u });

export type Deviation = { x: number; y: number; u: number };

/** Certificate minus model: density in kg/m³, viscosity in % of the model's. Standard uncertainties are the certificate's; points beyond the model's range have none. */
export function certificateDeviations(liquid: StoredModel, certificate: LotAnswer["certificate"]): { density: Deviation[]; viscosity: Deviation[] } {
  const density: Deviation[] = [];
  const viscosity: Deviation[] = [];
  for (const { temperatureC: x, densityKgM3, uDensityKgM3, viscosityMPaS, uViscosityMPaS } of certificate) {
    const at = propertiesAt(liquid, x);
    if (!at) continue;
    density.push({ x, y: densityKgM3 - at.densityKgM3, u: uDensityKgM3 });
    if (viscosityMPaS !== undefined && uViscosityMPaS !== undefined)
      viscosity.push({ x, y: (100 * (viscosityMPaS - at.viscosityMPaS)) / at.viscosityMPaS, u: (100 * uViscosityMPaS) / at.viscosityMPaS });
  }
  return { density, viscosity };
}
