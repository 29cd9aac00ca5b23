import { expect, test } from "vitest";
import { wireInFluid } from "@/app/(auth)/sign-in/wire-in-fluid";

/**
 * Tungsten wire of 0.10 mm, 1 kHz in vacuum, no losses but the fluid's. Computed independently with complex Bessel
 * functions checked against 40-digit arithmetic: the drag of G. G. Stokes (1851) in the form of J. E. Sader, J. Appl.
 * Phys. 84, 64 (1998).
 */
test.each([
  ["air at 20 °C", 1.2, 1.82e-5, 999.8783634769, 3606.231527],
  ["water at 20 °C", 998.207, 0.0010016, 957.9473436178, 24.55677033],
  ["2-propanol at 20 °C", 785.5, 0.00238, 956.4338132109, 16.32658089],
  ["glycerol-water, 60 %, at 20 °C", 1153.8, 0.0108, 912.3216559111, 5.832835934],
])("a wire in %s rings as Stokes' drag says", (_, densityKgM3, viscosityPaS, f0Hz, q) => {
  const wire = { radiusM: 5e-5, densityKgM3: 19_300, vacuumHz: 1000, vacuumQ: Infinity };
  const found = wireInFluid(wire, { densityKgM3, viscosityPaS });
  expect(Math.abs(found.f0Hz / f0Hz - 1)).toBeLessThan(1e-10);
  expect(Math.abs(found.q / q - 1)).toBeLessThan(1e-8);
});

test("losses of the clamps add to those of the fluid", () => {
  const wire = { radiusM: 5e-5, densityKgM3: 19_300, vacuumHz: 1000, vacuumQ: 1200 };
  const { q } = wireInFluid(wire, { densityKgM3: 1.2, viscosityPaS: 1.82e-5 });
  expect(q).toBeCloseTo(1 / (1 / 3606.231527 + 1 / 1200), 6);
});
