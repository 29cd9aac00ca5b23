import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ethanolWaterViscosity, propanolWaterDensity, propanolWaterViscosity } from "@/lib/fluids/aqueous-at-20";
import { alcoholViscosity } from "@/lib/fluids/alcohol-viscosity";
import { ethanolWaterDensity } from "@/lib/fluids/ethanol-water-density";
import { FluidRangeError } from "@/lib/fluids/fluid-range-error";
import { glycerolWaterDensity, glycerolWaterViscosity } from "@/lib/fluids/glycerol-water";
import { liquidProperties, liquidRange, type LiquidModel } from "@/lib/fluids/liquid-properties";
import { propanolDensity } from "@/lib/fluids/propanol-density";
import ethanolValues from "@/tests/reference/3-fluids/ethanol-water-density-oiml-r22.json";
import glycerolValues from "@/tests/reference/3-fluids/glycerol-water.json";
import { referenceTable, referenceText } from "../reference-table";
import { relativeError } from "../relative-error";

describe("pure alcohols", () => {
  it("have the handbook's viscosity (Viswanath, Natarajan 1989; CRC Handbook)", () => {
    for (const { substance, t_degC, handbook_from_memory, viswanath_natarajan } of referenceText("3-fluids/alcohols-pure-viscosity.csv")) {
      const found = alcoholViscosity(substance as "ethanol" | "2-propanol", Number(t_degC));
      expect(relativeError(found, Number(viswanath_natarajan))).toBeLessThan(1e-4);
      if (handbook_from_memory) expect(relativeError(found, Number(handbook_from_memory))).toBeLessThan(substance === "ethanol" ? 0.02 : 0.03);
    }
  });

  it("have the reference density (OIML R 22; CRC Handbook, VDI Heat Atlas)", () => {
    for (const { substance, t_degC, reference_density, vdi_ppds } of referenceText("3-fluids/alcohols-pure-density.csv")) {
      const t = Number(t_degC);
      const found = substance === "ethanol" ? ethanolWaterDensity({ temperatureC: t, massFraction: 1 }) : propanolDensity(t);
      const tolerance = substance === "ethanol" ? 0.05 : 1.5;
      if (reference_density) expect(Math.abs(found - Number(reference_density))).toBeLessThan(tolerance);
      if (substance === "2-propanol") expect(Math.abs(found - Number(vdi_ppds))).toBeLessThan(tolerance);
    }
  });
});

describe("ethanol and water", () => {
  it("has OIML R 22's density", () => {
    for (const { t, computed } of ethanolValues.check_pure_ethanol) expect(Math.abs(ethanolWaterDensity({ temperatureC: t, massFraction: 1 }) - computed)).toBeLessThan(1e-3);
    for (const { p, computed } of ethanolValues.check_20C) expect(Math.abs(ethanolWaterDensity({ temperatureC: 20, massFraction: p }) - computed)).toBeLessThan(1e-3);
    for (const { p, computed } of ethanolValues.check_25C) expect(Math.abs(ethanolWaterDensity({ temperatureC: 25, massFraction: p }) - computed)).toBeLessThan(1e-3);
  });

  it("has the CRC Handbook's density and viscosity at 20 °C", () => {
    for (const { mass_percent, density, viscosity } of referenceTable("3-fluids/ethanol-water-20C-crc.csv")) {
      const state = { temperatureC: 20, massFraction: mass_percent / 100 };
      expect(Math.abs(ethanolWaterDensity(state) / 1000 - density)).toBeLessThan(5e-4);
      expect(relativeError(ethanolWaterViscosity(state), viscosity)).toBeLessThan(1e-9);
    }
  });
});

describe("2-propanol and water", () => {
  it("has the CRC Handbook's values at 20 °C, and Lebo's density (1921) within 2 kg/m³", () => {
    for (const { mass_percent, density, viscosity } of referenceTable("3-fluids/2-propanol-water-20C-crc.csv")) {
      const state = { temperatureC: 20, massFraction: mass_percent / 100 };
      expect(relativeError(propanolWaterDensity(state), 1000 * density)).toBeLessThan(1e-9);
      if (mass_percent <= 20) expect(relativeError(propanolWaterViscosity(state), viscosity)).toBeLessThan(1e-9);
    }
    for (const { mass_percent, density } of referenceTable("3-fluids/2-propanol-water-20C-lebo.csv")) expect(Math.abs(propanolWaterDensity({ temperatureC: 20, massFraction: mass_percent / 100 }) / 1000 - density)).toBeLessThan(0.002);
  });

  it("gives no viscosity above 20 %, where the table ends", () => {
    expect(() => propanolWaterViscosity({ temperatureC: 20, massFraction: 0.201 })).toThrow(FluidRangeError);
  });
});

describe("glycerol and water", () => {
  it("has Cheng's viscosity (2008)", () => {
    for (const { t, C, mu } of glycerolValues.computed_check) expect(relativeError(glycerolWaterViscosity({ temperatureC: t, massFraction: C }), mu)).toBeLessThan(1e-6);
    for (const { t_degC, mass_fraction, cheng_2008 } of referenceTable("3-fluids/glycerol-water-viscosity.csv")) expect(relativeError(glycerolWaterViscosity({ temperatureC: t_degC, massFraction: mass_fraction }), cheng_2008)).toBeLessThan(1e-5);
  });

  it("is within 4 % of Segur and Oberstar's table (1951), its misprint at 40 °C and 0.65 aside", () => {
    for (const { t_degC, mass_fraction, table_segur_oberstar } of referenceTable("3-fluids/glycerol-water-viscosity.csv")) {
      if (t_degC === 40 && mass_fraction === 0.65) continue;
      expect(relativeError(glycerolWaterViscosity({ temperatureC: t_degC, massFraction: mass_fraction }), table_segur_oberstar)).toBeLessThan(0.04);
    }
  });

  it("has Bosart and Snoddy's density (1927), and the CRC Handbook's within 1.2 kg/m³", () => {
    const { mass_fraction, t20, t25, t30 } = glycerolValues.density_bosart_snoddy;
    for (const [t, row] of [[20, t20], [25, t25], [30, t30]] as const) mass_fraction.forEach((w, i) => expect(glycerolWaterDensity({ temperatureC: t, massFraction: w })).toBeCloseTo(1000 * row[i], 6));
    for (const { mass_percent, density } of referenceTable("3-fluids/glycerol-water-20C-crc.csv")) expect(Math.abs(glycerolWaterDensity({ temperatureC: 20, massFraction: mass_percent / 100 }) / 1000 - density)).toBeLessThan(0.0012);
  });
});

describe("the laboratory's own liquids by table", () => {
  const table = [
    { temperatureC: 30, densityKgM3: 860, viscosityMPaS: 2 },
    { temperatureC: 10, densityKgM3: 880, viscosityMPaS: 8 },
  ];

  it("go straight in density and straight in ln η, whatever the order of the rows", () => {
    expect(liquidProperties({ model: "table", table }, 20)).toEqual({ densityKgM3: 870, viscosityMPaS: expect.closeTo(4, 12) as number });
    expect(liquidProperties({ model: "table", table }, 10)).toEqual({ densityKgM3: 880, viscosityMPaS: expect.closeTo(8, 12) as number });
    expect(liquidProperties({ model: "table", table }, 30)).toEqual({ densityKgM3: 860, viscosityMPaS: expect.closeTo(2, 12) as number });
  });

  it("stay between their neighbours", () => {
    const rows = fc.uniqueArray(
      fc.record({ temperatureC: fc.integer({ min: -20, max: 90 }), densityKgM3: fc.double({ min: 600, max: 2000, noNaN: true }), viscosityMPaS: fc.double({ min: 0.1, max: 5000, noNaN: true }) }),
      { selector: ({ temperatureC }) => temperatureC, minLength: 2, maxLength: 8 },
    );
    fc.assert(
      fc.property(rows, fc.double({ min: 0, max: 1, noNaN: true }), (points, share) => {
        const sorted = [...points].sort((a, b) => a.temperatureC - b.temperatureC);
        const t = sorted[0].temperatureC + share * (sorted[sorted.length - 1].temperatureC - sorted[0].temperatureC);
        const upper = Math.max(1, sorted.findIndex(({ temperatureC }) => temperatureC >= t));
        const pair = sorted.slice(upper - 1, upper + 1);
        const { densityKgM3, viscosityMPaS } = liquidProperties({ model: "table", table: points }, t);
        const within = (value: number, ends: number[]) => value >= Math.min(...ends) * (1 - 1e-12) && value <= Math.max(...ends) * (1 + 1e-12);
        return within(densityKgM3, pair.map((row) => row.densityKgM3)) && within(viscosityMPaS, pair.map((row) => row.viscosityMPaS));
      }),
    );
  });

  it("refuse what is no table", () => {
    const refuse = (rows: typeof table) => expect(() => liquidProperties({ model: "table", table: rows }, 20)).toThrow(RangeError);
    refuse([]);
    refuse([table[0], { ...table[1], temperatureC: 30 }]);
    refuse([table[0], { ...table[1], viscosityMPaS: 0 }]);
    refuse([table[0], { ...table[1], densityKgM3: Number.NaN }]);
  });

  it("say nothing outside their rows", () => {
    expect(() => liquidProperties({ model: "table", table }, 9.99)).toThrow(/known for temperature \/ °C from 10 to 30/);
  });
});

describe("every model", () => {
  const models: LiquidModel[] = [
    { model: "water" },
    { model: "ethanol" },
    { model: "2-propanol" },
    { model: "ethanol-water", massFraction: 0.4 },
    { model: "2-propanol-water", massFraction: 0.1 },
    { model: "glycerol-water", massFraction: 0.6 },
    { model: "table", table: [{ temperatureC: 5, densityKgM3: 900, viscosityMPaS: 3 }, { temperatureC: 25, densityKgM3: 890, viscosityMPaS: 2 }] },
  ];

  it.each(models)("gives numbers in the whole range it states and an error just outside: $model", (model) => {
    const { minC, maxC } = liquidRange(model);
    for (const t of [minC, (minC + maxC) / 2, maxC]) {
      const { densityKgM3, viscosityMPaS } = liquidProperties(model, t);
      expect(densityKgM3).toBeGreaterThan(500);
      expect(viscosityMPaS).toBeGreaterThan(0.1);
    }
    expect(() => liquidProperties(model, minC - 0.01)).toThrow(FluidRangeError);
    expect(() => liquidProperties(model, maxC + 0.01)).toThrow(FluidRangeError);
    expect(() => liquidProperties(model, Number.NaN)).toThrow(FluidRangeError);
  });

  it("refuses a mass fraction that is none", () => {
    for (const name of ["ethanol-water", "2-propanol-water", "glycerol-water"] as const) {
      expect(() => liquidProperties({ model: name, massFraction: 1.01 }, 20)).toThrow(FluidRangeError);
      expect(() => liquidProperties({ model: name, massFraction: -0.01 }, 20)).toThrow(FluidRangeError);
    }
  });
});
