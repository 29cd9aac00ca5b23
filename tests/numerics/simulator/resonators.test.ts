import { describe, expect, it } from "vitest";
import { beamEigenvalue, beamFrequency, type Boundary } from "@/rig-simulator/physics/beam";
import { immersedResonance } from "@/rig-simulator/physics/immersed";
import { stokesDrag } from "@/rig-simulator/physics/stokes";
import { sweepVoltages } from "@/rig-simulator/physics/sweep";
import { keyOf } from "@/rig-simulator/physics/random";
import { tubeResonance } from "@/rig-simulator/physics/tube";
import { loadScenario } from "@/rig-simulator/load-scenario";
import beamValues from "@/tests/reference/4-resonator-physics/beam-eigenvalues.json";
import relations from "@/tests/reference/4-resonator-physics/resonator-relations.json";
import { referenceTable } from "../reference-table";
import { relativeError } from "../relative-error";

describe("Stokes' added mass and drag of a cylinder", () => {
  it("is Γ of Rosenhead (1963) and Sader (1998) from Re 0.01 to 10⁷", () => {
    for (const { Re, gamma_real, gamma_imag } of referenceTable("4-resonator-physics/gamma-circ.csv")) {
      const { k, kPrime } = stokesDrag(Re);
      expect(relativeError(k, gamma_real)).toBeLessThan(1e-9);
      expect(relativeError(kPrime, gamma_imag)).toBeLessThan(1e-9);
    }
  });

  it("is k and k′ as Stokes printed them (1851), m = √Re/2", () => {
    for (const row of referenceTable("4-resonator-physics/stokes-k.csv")) {
      const { k, kPrime } = stokesDrag(4 * row.m ** 2);
      expect(relativeError(k, row.k)).toBeLessThan(1e-8);
      expect(relativeError(kPrime, row.k_prime)).toBeLessThan(1e-8);
    }
  });

  it("does not jump where the series hands over to the fraction", () => {
    const below = stokesDrag(4 * (1 - 1e-12));
    const above = stokesDrag(4 * (1 + 1e-12));
    expect(relativeError(above.k, below.k)).toBeLessThan(1e-11);
    expect(relativeError(above.kPrime, below.kPrime)).toBeLessThan(1e-11);
  });

  it("refuses numbers without meaning", () => {
    for (const reynolds of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) expect(() => stokesDrag(reynolds)).toThrow(RangeError);
  });
});

describe("beams (Euler–Bernoulli)", () => {
  const names: Record<string, Boundary> = {
    "clamped-free (cantilever, tuning-fork tine): cos x cosh x = -1": "clamped-free",
    "clamped-clamped and free-free: cos x cosh x = 1": "clamped-clamped",
    "clamped-pinned and free-pinned: tan x = tanh x": "clamped-pinned",
    "pinned-pinned: sin x = 0": "pinned-pinned",
  };

  it.each(Object.entries(beamValues.roots))("have the eigenvalues of %s", (name, roots) => {
    roots.forEach((root, i) => expect(relativeError(beamEigenvalue(names[name], i + 1), Number(root))).toBeLessThan(1e-12));
  });

  it("have no mode 0", () => {
    expect(() => beamEigenvalue("clamped-free", 0)).toThrow(RangeError);
  });
});

describe("a wire or rod in a fluid", () => {
  it("has the f and Q of the published relations, from a tungsten wire in air to a silica rod in glycerol", () => {
    for (const row of referenceTable("4-resonator-physics/immersed-wire-examples.csv")) {
      const body = { radiusM: row.R, bodyDensityKgM3: row.rho_s, vacuumHz: row.f_vac, intrinsicQ: Number.POSITIVE_INFINITY };
      const { f0Hz, q } = immersedResonance(body, { densityKgM3: row.rho, viscosityMPaS: row.eta * 1000 });
      expect(relativeError(f0Hz, row.f)).toBeLessThan(1e-10);
      expect(relativeError(q, row.Q)).toBeLessThan(1e-9);
    }
  });

  it("adds its own losses to the fluid's", () => {
    const body = { radiusM: 3e-4, bodyDensityKgM3: 8000, vacuumHz: 2400, intrinsicQ: Number.POSITIVE_INFINITY };
    const water = { densityKgM3: 998.2, viscosityMPaS: 1.0016 };
    const free = immersedResonance(body, water);
    const lossy = immersedResonance({ ...body, intrinsicQ: 500 }, water);
    expect(1 / lossy.q).toBeCloseTo(1 / free.q + 1 / 500, 12);
    expect(lossy.f0Hz).toBe(free.f0Hz);
  });
});

describe("a tube with fluid inside", () => {
  const tube = { lengthM: 0.075, innerRadiusM: 0.0015, outerRadiusM: 0.00175, modulusPa: 193e9, wallDensityKgM3: 8000, intrinsicQ: 2400 };

  it("is the bare beam with the fluid's mass, where the fluid is thin", () => {
    const wall = 8000 * Math.PI * (0.00175 ** 2 - 0.0015 ** 2);
    const stiffnessNm2 = (193e9 * Math.PI * (0.00175 ** 4 - 0.0015 ** 4)) / 4;
    const massPerLengthKgM = wall + 1000 * Math.PI * 0.0015 ** 2;
    const bare = beamFrequency({ lengthM: 0.075, stiffnessNm2, massPerLengthKgM, eigenvalue: beamEigenvalue("clamped-clamped") });
    expect(relativeError(tubeResonance(tube, { densityKgM3: 1000, viscosityMPaS: 1e-9 }).f0Hz, bare)).toBeLessThan(1e-8);
  });

  it("is straight in 1/f0² against density but for the layer at the wall", () => {
    const inverse = (densityKgM3: number, viscosityMPaS: number) => tubeResonance(tube, { densityKgM3, viscosityMPaS }).f0Hz ** -2;
    const expected = (inverse(800, 1e-9) + inverse(1200, 1e-9)) / 2;
    expect(relativeError(inverse(1000, 1e-9), expected)).toBeLessThan(1e-9);
    const layer = relativeError(inverse(1000, 1), expected);
    expect(layer).toBeGreaterThan(1e-6);
    expect(layer).toBeLessThan(1e-4);
  });

  it("loses as much per cycle as the layer carries: quality falls with √η", () => {
    const loss = (viscosityMPaS: number) => 1 / tubeResonance({ ...tube, intrinsicQ: Number.POSITIVE_INFINITY }, { densityKgM3: 1000, viscosityMPaS }).q;
    expect(loss(4) / loss(1)).toBeCloseTo(2, 3);
  });
});

describe("a sweep", () => {
  const quiet = (readout: "velocity" | "displacement") => {
    const scenario = loadScenario("quick");
    return { ...scenario, sensor: { ...scenario.sensor, readout }, signal: { ...scenario.signal, noiseV: 0, phaseRad: 0, offsetVPerV: [0, 0] as [number, number], slopeVPerV: [0, 0] as [number, number] } };
  };
  const { f0, Q, f1, f2, f_r } = relations.numeric_example;
  const resonance = { f0Hz: f0, q: Q };
  const magnitudes = (readout: "velocity" | "displacement", startHz: number, stopHz: number, points: number) => {
    const { re, im } = sweepVoltages(quiet(readout), resonance, resonance, { startHz, stopHz, points, dwellS: 1, driveV: 1 }, keyOf(1));
    return re.map((value, i) => Math.hypot(value, im[i]));
  };

  it("in velocity has its half-power points at f1 and f2 and its peak at f0", () => {
    const [low, peak, high] = [f1, f0, f2].map((f) => magnitudes("velocity", f, f + 1, 2)[0]);
    expect(low).toBeCloseTo(Math.SQRT1_2, 8);
    expect(high).toBeCloseTo(Math.SQRT1_2, 8);
    expect(peak).toBe(1);
  });

  it("in displacement has its peak at f_r, 90 degrees late", () => {
    const step = 1e-3;
    const around = magnitudes("displacement", f_r - 200 * step, f_r + 200 * step, 401);
    const top = around.indexOf(Math.max(...around));
    expect(Math.abs(top - 200)).toBeLessThanOrEqual(4);
    const { re, im } = sweepVoltages(quiet("displacement"), resonance, resonance, { startHz: f0, stopHz: f0 + 1, points: 2, dwellS: 1, driveV: 1 }, keyOf(1));
    expect(Math.atan2(im[0], re[0])).toBeCloseTo(-Math.PI / 2, 8);
  });

  it("is the model V(f) = a/(1 + iQ(f/f0 − f0/f)) + b + c(f − fm)/(f2 − f1), downwards too", () => {
    const scenario = { ...quiet("velocity"), signal: { ...quiet("velocity").signal, phaseRad: 0.7, offsetVPerV: [0.3, -0.2] as [number, number], slopeVPerV: [0.05, 0.02] as [number, number] } };
    const params = { startHz: 1030, stopHz: 970, points: 61, dwellS: 1, driveV: 0.5 };
    const { re, im } = sweepVoltages(scenario, resonance, resonance, params, keyOf(1));
    for (let i = 0; i < 61; i++) {
      const f = 1030 - i;
      const x = Q * (f / f0 - f0 / f);
      const [cos, sin] = [Math.cos(0.7), Math.sin(0.7)];
      const share = i / 60 - 0.5;
      expect(re[i]).toBeCloseTo(0.5 * ((cos + sin * x) / (1 + x * x) + 0.3 + 0.05 * share), 8);
      expect(im[i]).toBeCloseTo(0.5 * ((sin - cos * x) / (1 + x * x) - 0.2 + 0.02 * share), 8);
    }
  });

  it("has the noise that the scenario says, white and apart in both quadratures", () => {
    const base = quiet("velocity");
    const noisy = { ...base, signal: { ...base.signal, noiseV: 1e-3 } };
    const params = { startHz: 970, stopHz: 1030, points: 4001, dwellS: 1, driveV: 1 };
    const clean = sweepVoltages(base, resonance, resonance, params, keyOf(5));
    const found = sweepVoltages(noisy, resonance, resonance, params, keyOf(5));
    const re = found.re.map((value, i) => (value - clean.re[i]) / 1e-3);
    const im = found.im.map((value, i) => (value - clean.im[i]) / 1e-3);
    const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
    expect(Math.sqrt(mean(re.map((value) => value * value)))).toBeCloseTo(1, 1);
    expect(Math.sqrt(mean(im.map((value) => value * value)))).toBeCloseTo(1, 1);
    expect(Math.abs(mean(re.map((value, i) => value * im[i])))).toBeLessThan(0.06);
    expect(Math.abs(mean(re.slice(1).map((value, i) => value * re[i])))).toBeLessThan(0.06);
  });
});
