import { describe, expect, test } from "vitest";
import { certificateDeviations, propertyCurves } from "@/lib/liquids/curve";

const water = { name: "Water", model: "water", massFraction: null, table: null };
const stated = { minC: 0, maxC: 40, uDensityKgM3: 0.01, uViscosityPercent: 0.5 };

describe("the curves of a liquid", () => {
  // Density of water at 20 °C: Tanaka et al., Metrologia 38 (2001) 301, table 1; viscosity at 20 °C: ISO/TR 3666:1998, 1.0016 mPa·s.
  test("pass through the published values of water at 20 °C", () => {
    const { density, viscosity } = propertyCurves(water, stated, 41);
    expect(density[20]).toMatchObject({ x: 20 });
    expect(density[20].y).toBeCloseTo(998.2067, 2);
    expect(viscosity[20].y).toBeCloseTo(1.0016, 3);
  });

  test("have a band of two stated standard uncertainties, relative for viscosity", () => {
    const { density, viscosity } = propertyCurves(water, stated, 3);
    expect(density[1].high! - density[1].low!).toBeCloseTo(0.04, 10);
    expect((viscosity[1].high! - viscosity[1].low!) / viscosity[1].y).toBeCloseTo(0.02, 10);
  });

  test("have no band where the model states no uncertainty", () => {
    const table = [{ temperatureC: 10, densityKgM3: 900, viscosityMPaS: 12 }, { temperatureC: 30, densityKgM3: 890, viscosityMPaS: 3 }];
    const { density, viscosity } = propertyCurves({ name: "Oil", model: "table", massFraction: null, table }, { minC: 10, maxC: 30, uDensityKgM3: null, uViscosityPercent: null }, 3);
    expect(density).toEqual([{ x: 10, y: 900 }, { x: 20, y: 895 }, { x: 30, y: 890 }]);
    // Straight in ln η: the middle is the geometric mean.
    expect(viscosity[1].y).toBeCloseTo(6, 10);
  });

  test("end where the range of the model ends", () => {
    const { density } = propertyCurves(water, stated, 7);
    expect([density[0].x, density.at(-1)?.x]).toEqual([0, 40]);
  });
});

describe("certificate minus model", () => {
  test("is absolute in density and relative in viscosity, each with the certificate's uncertainty", () => {
    const { density, viscosity } = certificateDeviations(water, [{ temperatureC: 20, densityKgM3: 998.3067, uDensityKgM3: 0.03, viscosityMPaS: 1.0116, uViscosityMPaS: 0.005 }]);
    expect(density[0].y).toBeCloseTo(0.1, 2);
    expect(density[0].u).toBe(0.03);
    expect(viscosity[0].y).toBeCloseTo(1, 1);
    expect(viscosity[0].u).toBeCloseTo(0.499, 2);
  });

  test("leaves out viscosity that was not certified, and points that the model does not reach", () => {
    const { density, viscosity } = certificateDeviations(water, [{ temperatureC: 20, densityKgM3: 998, uDensityKgM3: 0.03 }, { temperatureC: 300, densityKgM3: 700, uDensityKgM3: 1 }]);
    expect(density).toHaveLength(1);
    expect(viscosity).toEqual([]);
  });
});
