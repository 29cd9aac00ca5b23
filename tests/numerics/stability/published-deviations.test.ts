import { describe, expect, test } from "vitest";
import { deviation, type Statistic } from "@/lib/numerics/stability/deviation";
import thousand from "@/tests/reference/1-frequency-stability/lcg-1000-point.json";
import small from "@/tests/reference/1-frequency-stability/nbs14-small-set.json";
import { lcgSeries } from "@/tests/numerics/stability/lcg-series";
import { referenceTable } from "@/tests/numerics/reference-table";
import { relativeError } from "@/tests/numerics/relative-error";

const statistics: Statistic[] = ["adev", "oadev", "mdev", "tdev", "hdev", "ohdev", "totdev"];

/** NIST SP 1065 (2008) section 12.4: Table 30 (nine values of NBS Monograph 140) and Table 31 (1000 values, eq. 73). */
const sets = [
  { name: "NBS Monograph 140 values, SP 1065 Table 30", y: Float64Array.from(small.frequency), rows: small.deviations },
  { name: "1000-point set, SP 1065 Table 31", y: lcgSeries(), rows: thousand.deviations },
];

describe.each(sets)("$name", ({ y, rows }) => {
  test.each(statistics)("%s equals every printed figure and its number of terms", (statistic) => {
    const row = rows.find((one) => one.statistic === statistic);
    if (!row?.published) throw new Error(`no printed ${statistic}`);
    row.averaging_factor.forEach((m, i) => {
      const found = deviation(statistic, [y], m);
      expect(relativeError(found?.deviation, row.published[i])).toBeLessThan(1e-6);
      expect(relativeError(found?.deviation, row.computed[i])).toBeLessThan(1e-8);
      expect(found?.n).toBe(row.analysis_terms[i]);
    });
  });
});

/** Computed from SP 1065's 1000-point series by independent code that reproduces the printed figures. */
describe("1000-point set at all octaves", () => {
  const octaves = referenceTable("1-frequency-stability/lcg-1000-octaves.csv");

  test.each(statistics)("%s", (statistic) => {
    expect(octaves).toHaveLength(9);
    for (const row of octaves) {
      expect(relativeError(deviation(statistic, [lcgSeries()], row.m)?.deviation, row[statistic])).toBeLessThan(1e-8);
    }
  });
});
