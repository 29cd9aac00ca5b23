import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { orderByTime, splitPhases } from "@/lib/imports/split-phases";

type Row = { at: number; medium?: number; cycle?: number; setPointC?: number };

function split(rows: readonly Row[], withCycles = false, withSetPoints = false) {
  const keys = {
    at: Float64Array.from(rows, ({ at }) => at),
    medium: Int32Array.from(rows, ({ medium = 0 }) => medium),
    ...(withCycles ? { cycle: Int32Array.from(rows, ({ cycle = 0 }) => cycle) } : {}),
    ...(withSetPoints ? { setPointC: Float64Array.from(rows, ({ setPointC = NaN }) => setPointC) } : {}),
  };
  return splitPhases(keys, orderByTime(keys.at)).map(({ from, to, medium, cycle, setPointC }) => [to - from, medium, cycle, setPointC]);
}

const run = (from: number, n: number, given: Partial<Row> = {}, spacing = 10): Row[] => Array.from({ length: n }, (_, i) => ({ at: from + spacing * i, ...given }));

describe("splitPhases", () => {
  it("makes a phase of each run of equal medium and cycle", () => {
    expect(split([...run(0, 5, { cycle: 1 }), ...run(50, 5, { medium: 1, cycle: 1 }), ...run(100, 5, { cycle: 2 }), ...run(150, 3, { cycle: 3 })], true)).toEqual([[5, 0, 1, null], [5, 1, 1, null], [5, 0, 2, null], [3, 0, 3, null]]);
  });

  it("splits at gaps of more than five times the median spacing, not at five", () => {
    expect(split([...run(0, 5), ...run(90, 5)], true)).toEqual([[10, 0, 0, null]]);
    expect(split([...run(0, 5), ...run(91, 5)], true)).toEqual([[5, 0, 0, null], [5, 0, 0, null]]);
  });

  it("judges gaps by what is usual in the medium", () => {
    const rows = [...run(0, 5, { cycle: 1 }), ...run(100, 5, { medium: 1, cycle: 1 }, 300), ...run(1700, 1, { cycle: 2 }), ...run(1800, 1, { cycle: 2 })];
    expect(split(rows, true).map(([n]) => n)).toEqual([5, 5, 1, 1]);
  });

  it("of clocks that show whole minutes takes the spacings that are not nothing", () => {
    expect(split([0, 0, 0, 60, 60, 60, 120, 120, 900, 900].map((at) => ({ at }))).map(([n]) => n)).toEqual([8, 2]);
  });

  it("splits where the set-point changes", () => {
    expect(split([...run(0, 3, { setPointC: 20 }), ...run(30, 3, { setPointC: 30 }), ...run(60, 3)], false, true).map(([n, , , setPointC]) => [n, setPointC])).toEqual([[3, 20], [3, 30], [3, null]]);
  });

  it("without a column for it begins a cycle where a medium comes again", () => {
    const media = [0, 1, 2, 0, 1, 1, 0];
    const rows = media.flatMap((medium, i) => run(i * 1000, 4, { medium }));
    expect(split(rows).map(([, medium, cycle]) => [medium, cycle])).toEqual([[0, 1], [1, 1], [2, 1], [0, 2], [1, 2], [1, 3], [0, 3]]);
  });

  it("puts rows in order of time, equal times as they stand", () => {
    expect([...orderByTime(Float64Array.of(3, 1, 2, 1))]).toEqual([1, 3, 2, 0]);
    expect(split([...run(100, 5, { medium: 1, cycle: 1 }), ...run(0, 5, { cycle: 1 })], true)).toEqual([[5, 0, 1, null], [5, 1, 1, null]]);
  });

  it("puts every row into one phase, whose rows agree, whatever the rows and their order", () => {
    const row = fc.record({ at: fc.nat(5000), medium: fc.nat(2), cycle: fc.nat(3) });
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 80 }), (rows) => {
        const at = Float64Array.from(rows, (one) => one.at);
        const medium = Int32Array.from(rows, (one) => one.medium);
        const cycle = Int32Array.from(rows, (one) => one.cycle);
        const order = orderByTime(at);
        const phases = splitPhases({ at, medium, cycle }, order);
        expect(phases[0].from).toBe(0);
        expect(phases[phases.length - 1].to).toBe(rows.length);
        phases.forEach((phase, i) => {
          expect(phase.to).toBeGreaterThan(phase.from);
          if (i > 0) expect(phase.from).toBe(phases[i - 1].to);
          for (const k of order.subarray(phase.from, phase.to)) expect([medium[k], cycle[k]]).toEqual([phase.medium, phase.cycle]);
        });
      }),
    );
  });
});
