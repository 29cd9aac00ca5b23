import { expect, test } from "vitest";
import { ageing } from "@/lib/numerics/drift/ageing";
import { gaussian } from "@/tests/numerics/seeded-noise";

const x = Float64Array.from({ length: 80 }, (_, i) => 100 + i);

test("recovers the law it was made from", () => {
  const next = gaussian(6);
  const found = ageing({ x, y: x.map((time) => 20 + 3 * Math.log1p((time - 100) / 5) + 0.01 * next()) });
  expect(found?.preferred).toBe("ageing");
  expect(found?.aiccDifference).toBeLessThan(-100);
  expect(found?.a).toBeCloseTo(20, 1);
  expect(found?.b).toBeCloseTo(3, 1);
  expect(Math.abs((found?.tau ?? NaN) - 5)).toBeLessThan(0.2);
});

test("a straight drift stays a line", () => {
  const next = gaussian(8);
  let lines = 0;
  for (let run = 0; run < 40; run++) {
    if (ageing({ x, y: x.map((time) => 20 + 0.05 * time + next()) })?.preferred === "line") lines++;
  }
  expect(lines).toBeGreaterThan(28); // AICc prefers the larger model in about one case in six
});

test("too few values, exact fits, bad input", () => {
  expect(ageing({ x: x.subarray(0, 7), y: x.subarray(0, 7) })).toBeUndefined();
  expect(ageing({ x, y: new Float64Array(80) })).toBeUndefined();
  expect(() => ageing({ x, y: new Float64Array(79) })).toThrow(RangeError);
  expect(() => ageing({ x, y: new Float64Array(80).fill(NaN) })).toThrow(RangeError);
});
