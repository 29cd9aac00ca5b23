import { solve, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { fitRingDown } from "@/lib/numerics/resonance/fit-ring-down";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import reference from "@/tests/reference/4-resonator-physics/resonator-relations.json";

// Source of every number: tests/reference/4-resonator-physics/resonator-relations.json (damped harmonic oscillator).
const { numeric_example: example, lorentzian_vs_exact: lorentzian } = reference;
const oscillator = { f0Hz: example.f0, q: example.Q, a: { re: 1, im: 0 } };

function heightAt(readout: "velocity" | "displacement", f: number): number {
  const { re, im } = evaluateResonance(Float64Array.of(f), { readout, ...oscillator });
  return Math.hypot(re[0], im[0]);
}

describe("the model against the published oscillator", () => {
  it("velocity: half power at f1 and f2, peak at f0", () => {
    expect(heightAt("velocity", example.f1) ** 2).toBeCloseTo(0.5, 9);
    expect(heightAt("velocity", example.f2) ** 2).toBeCloseTo(0.5, 9);
    expect(heightAt("velocity", example.f0)).toBeCloseTo(1, 12);
  });

  it("displacement: peak at f_r, of the published height over the static one", () => {
    const peak = heightAt("displacement", example.f_r);
    expect(peak).toBeGreaterThan(heightAt("displacement", example.f_r * (1 + 1e-6)));
    expect(peak).toBeGreaterThan(heightAt("displacement", example.f_r * (1 - 1e-6)));
    // |a| is the height at f0, Q times the static deflection.
    expect(Math.abs((peak * example.Q) / example.peak_over_static - 1)).toBeLessThan(1e-9);
  });

  it("displacement lags by exactly 90° at f0", () => {
    const { re, im } = evaluateResonance(Float64Array.of(example.f0), { readout: "displacement", ...oscillator });
    expect(re[0]).toBeCloseTo(0, 12);
    expect(im[0]).toBeCloseTo(-1, 12);
  });

  it("ring-down: a tone at f_d dying with tau has the published f0 and Q", () => {
    const sampleHz = 16_000;
    const volts = Float64Array.from({ length: 1200 }, (_, i) => {
      const t = i / sampleHz;
      return 0.3 + Math.exp(-t / example.tau) * Math.cos(2 * Math.PI * example.f_d * t + 0.7);
    });
    const fit = fitRingDown({ sampleHz, startS: 0, volts });
    expect(Math.abs(fit.f0Hz / example.f0 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(fit.q / example.Q - 1)).toBeLessThan(1e-9);
  });
});

/** Least squares of A/(1 + 2iQ(f − f0)/f0), A complex, over (f0, Q): Gauss–Newton on all four parameters. */
function fitLorentzian(f: Float64Array, re: Float64Array, im: Float64Array, start: { f0: number; q: number }): { f0: number; q: number } {
  let { f0, q } = start;
  let aRe = re[f.length >> 1];
  let aIm = im[f.length >> 1];
  for (let k = 0; k < 50; k++) {
    const jacobian = new Matrix(2 * f.length, 4);
    const residual = new Matrix(2 * f.length, 1);
    f.forEach((v, i) => {
      const x = (2 * q * (v - f0)) / f0;
      const p = 1 / (1 + x * x);
      const uRe = p;
      const uIm = -x * p;
      const sRe = uRe * uRe - uIm * uIm;
      const sIm = 2 * uRe * uIm;
      // ∂z/∂x = −iA·u²
      const zxRe = aRe * sIm + aIm * sRe;
      const zxIm = -(aRe * sRe - aIm * sIm);
      const shift = (-2 * q * v) / (f0 * f0);
      jacobian.setRow(2 * i, [zxRe * shift, zxRe * (x / q), uRe, -uIm]);
      jacobian.setRow(2 * i + 1, [zxIm * shift, zxIm * (x / q), uIm, uRe]);
      residual.set(2 * i, 0, re[i] - (aRe * uRe - aIm * uIm));
      residual.set(2 * i + 1, 0, im[i] - (aRe * uIm + aIm * uRe));
    });
    const step = solve(jacobian, residual, true).to1DArray();
    f0 += step[0];
    q += step[1];
    aRe += step[2];
    aIm += step[3];
  }
  return { f0, q };
}

describe("the oscillator is not a Lorentzian", () => {
  for (const { Q, span, df0_over_f0, dQ_over_Q } of lorentzian.bias) {
    const f0 = 1000;
    const half = (span * f0) / Q / 2;
    const frequencyHz = linearGrid(f0 - half, f0 + half, 401);
    const { re, im } = evaluateResonance(frequencyHz, { readout: "displacement", f0Hz: f0, q: Q, a: { re: 1, im: 0 } });

    it(`Q ${Q}, span ${span}: a Lorentzian is off by the published bias`, () => {
      const fit = fitLorentzian(frequencyHz, re, im, { f0, q: Q });
      expect(Math.abs((fit.f0 / f0 - 1) / df0_over_f0 - 1)).toBeLessThan(1e-4);
      expect(Math.abs((fit.q / Q - 1) / dQ_over_Q - 1)).toBeLessThan(1e-4);
    });

    it(`Q ${Q}, span ${span}: our fit is not`, () => {
      const fit = fitResonance({ kind: "complex", frequencyHz, re, im }, { readout: "displacement" });
      expect(Math.abs(fit.f0Hz / f0 - 1)).toBeLessThan(1e-11);
      expect(Math.abs(fit.q / Q - 1)).toBeLessThan(1e-9);
      expect(fit.flags).toEqual([]);
    });
  }
});
