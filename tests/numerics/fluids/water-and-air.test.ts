import { describe, expect, it } from "vitest";
import { airDensity } from "@/lib/fluids/air-density";
import { airViscosity } from "@/lib/fluids/air-viscosity";
import { FluidRangeError } from "@/lib/fluids/fluid-range-error";
import { waterDensity } from "@/lib/fluids/water-density";
import { waterViscosity, waterViscosityAtK } from "@/lib/fluids/water-viscosity";
import { waterViscosityGeneral } from "@/lib/fluids/water-viscosity-general";
import airDensityValues from "@/tests/reference/3-fluids/air-density.json";
import airViscosityValues from "@/tests/reference/3-fluids/air-viscosity.json";
import waterViscosityValues from "@/tests/reference/3-fluids/water-viscosity.json";
import waterDensityValues from "@/tests/reference/3-fluids/water-density.json";
import { referenceTable } from "../reference-table";
import { relativeError } from "../relative-error";

describe("density of water (Tanaka et al. 2001)", () => {
  it.each(waterDensityValues.check_values)("is $density kg/m³ at $t °C", ({ t, density, computed }) => {
    expect(Math.abs(waterDensity(t) - density)).toBeLessThan(1e-4);
    expect(relativeError(waterDensity(t), computed)).toBeLessThan(1e-9);
  });

  it("is the published formula at every degree, and so is its slope", () => {
    for (const { t, density, drho_dt } of referenceTable("3-fluids/water-density-tanaka.csv")) {
      expect(relativeError(waterDensity(t), density)).toBeLessThan(1e-9);
      if (t > 0 && t < 40) expect((waterDensity(t + 1e-3) - waterDensity(t - 1e-3)) / 2e-3).toBeCloseTo(drho_dt, 5);
    }
  });

  it("agrees with IAPWS SR6-08 at 25 °C within the rounding of pressure", () => {
    const iapws = waterViscosityValues.SR6_08.density_check.find(({ T }) => T === 298.15);
    expect(Math.abs(waterDensity(25) - (iapws?.rho ?? 0))).toBeLessThan(2e-3);
  });

  it.each([-0.001, 40.001, Number.NaN, Number.POSITIVE_INFINITY])("says nothing at %f °C", (t) => {
    expect(() => waterDensity(t)).toThrow(FluidRangeError);
  });
});

describe("viscosity of water", () => {
  it.each(waterViscosityValues.SR6_08.check)("is $eta µPa·s at $T K and 0.1 MPa (IAPWS SR6-08)", ({ T, eta }) => {
    expect(relativeError(waterViscosityAtK(T) * 1000, eta)).toBeLessThan(1e-8);
  });

  it("is the published formula at round temperatures", () => {
    for (const [t, eta] of Object.entries(waterViscosityValues.SR6_08.computed)) expect(relativeError(waterViscosity(Number(t)) * 1000, eta)).toBeLessThan(1e-8);
  });

  it("is 1.0016 mPa·s at 20 °C within 0.17 % (ISO/TR 3666)", () => {
    expect(relativeError(waterViscosity(20), waterViscosityValues.ISO_TR_3666.value_mPa_s)).toBeLessThan(0.0017);
  });

  it.each(waterViscosityValues.R12_08.check)("is $mu µPa·s at $T K and $rho kg/m³ (IAPWS R12-08)", ({ T, rho, mu }) => {
    const printedRounding = 5.1e-7;
    expect(Math.abs(waterViscosityGeneral({ temperatureK: T, densityKgM3: rho }) * 1000 - mu)).toBeLessThan(printedRounding);
  });

  it("is the same by both formulas in the laboratory's range", () => {
    for (let t = 0; t <= 40; t += 5) {
      const general = waterViscosityGeneral({ temperatureK: t + 273.15, densityKgM3: waterDensity(t) });
      expect(relativeError(waterViscosity(t), general)).toBeLessThan(5e-4);
    }
  });

  it.each([-0.1, 100.1, Number.NaN])("says nothing at %f °C", (t) => {
    expect(() => waterViscosity(t)).toThrow(FluidRangeError);
  });
});

describe("density of air (CIPM-2007)", () => {
  it.each(airDensityValues.computed_values)("is $density kg/m³ at $t °C, $p Pa, humidity $h", ({ t, p, h, x_CO2, density, OIML_R111_approximation }) => {
    const found = airDensity({ temperatureC: t, pressurePa: p, humidityPercent: 100 * h, carbonDioxide: x_CO2 });
    expect(relativeError(found, density)).toBeLessThan(1e-8);
    expect(relativeError(found, OIML_R111_approximation)).toBeLessThan(2e-4);
  });

  it("takes 400 ppm of carbon dioxide unless told otherwise", () => {
    const state = { temperatureC: 20, pressurePa: 101_325, humidityPercent: 50 };
    expect(airDensity(state)).toBe(airDensity({ ...state, carbonDioxide: 0.0004 }));
    expect(airDensity({ ...state, carbonDioxide: 0.0006 })).toBeGreaterThan(airDensity(state));
  });

  it.each([
    { temperatureC: 14.9, pressurePa: 101_325, humidityPercent: 50 },
    { temperatureC: 27.1, pressurePa: 101_325, humidityPercent: 50 },
    { temperatureC: 20, pressurePa: 59_999, humidityPercent: 50 },
    { temperatureC: 20, pressurePa: 110_001, humidityPercent: 50 },
    { temperatureC: 20, pressurePa: 101_325, humidityPercent: 101 },
  ])("says nothing for %o", (state) => {
    expect(() => airDensity(state)).toThrow(FluidRangeError);
  });
});

describe("viscosity of air (Lemmon and Jacobsen 2004)", () => {
  const molarMassKg = airViscosityValues.lemmon_jacobsen.M / 1000;

  it.each(airViscosityValues.lemmon_jacobsen.check_uPa_s)("is $mu µPa·s at $T K and $rho mol/m³", ({ T, rho, mu }) => {
    const found = airViscosity({ temperatureC: T - 273.15, densityKgM3: rho * molarMassKg });
    expect(relativeError(found * 1000, mu)).toBeLessThan(5e-6);
  });

  it("is the published formula for the dilute gas", () => {
    for (const [T, mu] of Object.entries(airViscosityValues.lemmon_jacobsen.computed_dilute)) expect(relativeError(airViscosity({ temperatureC: Number(T) - 273.15 }) * 1000, mu)).toBeLessThan(1e-6);
  });

  it("is within 0.5 % of the US Standard Atmosphere 1976 at room conditions", () => {
    const found = airViscosity({ temperatureC: 20, densityKgM3: 1.2045 }) * 1e-3;
    expect(relativeError(found, airViscosityValues.sutherland.computed["293.15"])).toBeLessThan(0.005);
    expect(relativeError(found * 1e6, airViscosityValues.at_1_atm_293_15K_uPa_s)).toBeLessThan(1e-4);
  });

  it("says nothing below −200 °C or for a negative density", () => {
    expect(() => airViscosity({ temperatureC: -201 })).toThrow(FluidRangeError);
    expect(() => airViscosity({ temperatureC: 20, densityKgM3: -1 })).toThrow(FluidRangeError);
  });
});
