import { readBackToAir } from "@/lib/analysis/back-to-air";
import { readDrift } from "@/lib/analysis/drift";
import { driftQuery, stabilityQuery } from "@/lib/analysis/schema";
import { findFitRun } from "@/lib/analysis/select-phases";
import { readStability } from "@/lib/analysis/stability";
import { rows } from "@/lib/db";
import type { Cell, Column, Table } from "@/lib/export/table";

const COLUMNS: readonly Column[] = [
  { name: "quantity", unit: "", what: "f0 or Q" },
  { name: "medium", unit: "", what: "air, or the slot of the liquid" },
  { name: "setPointC", unit: "°C", what: "set-point of the cell" },
  { name: "result", unit: "", what: "drift; Allan deviation within phases or from phase to phase; shift of an air reference from its baseline" },
  { name: "tauS", unit: "s", what: "averaging time of a deviation" },
  { name: "at", unit: "", what: "time of an air reference" },
  { name: "value", unit: "see unit", what: "the result" },
  { name: "u", unit: "see unit", what: "its standard uncertainty, where it has one" },
  { name: "lower", unit: "see unit", what: "lower end of its interval" },
  { name: "upper", unit: "see unit", what: "upper end of its interval" },
  { name: "level", unit: "1", what: "confidence level of the interval" },
  { name: "unit", unit: "", what: "unit of value, u, lower and upper" },
  { name: "n", unit: "1", what: "values or terms behind it" },
  { name: "note", unit: "", what: "what was used, and the noise type of a deviation" },
];

type Row = Partial<Record<"quantity" | "medium" | "setPointC" | "result" | "tauS" | "at" | "value" | "u" | "lower" | "upper" | "level" | "unit" | "n" | "note", Cell>>;

const cells = (row: Row): Cell[] => COLUMNS.map(({ name }) => row[name as keyof Row] ?? null);

const DEVIATION_LEVEL = 0.683;
const DRIFT_LEVEL = 0.95;

/** What the pages of a campaign conclude: drift and deviations of each medium and set-point, and how the air reference came back. */
export function resultsTable({ campaignId, fitRunId }: { campaignId: string; fitRunId?: string }): Table {
  async function* results(): AsyncGenerator<Cell[][]> {
    const run = await findFitRun(campaignId, fitRunId);
    const series = await rows<{ medium: string; setPointC: number | null }>(
      `select medium, set_point_c as "setPointC" from phase p where campaign_id = $1 and exists (select 1 from phase_summary where phase_id = p.id and fit_run_id = $2)
        group by 1, 2 order by min(sequence)`,
      [campaignId, run ?? null],
    );
    for (const { medium, setPointC } of series) {
      for (const quantity of ["f0", "q"] as const) {
        const about = { quantity, medium, setPointC };
        const asked = { quantity, medium, fitRunId: run, ...(setPointC === null ? {} : { setPointC }) };
        yield [cells({ ...about, ...driftRow(await readDrift(campaignId, driftQuery.parse(asked))) })];
        for (const view of ["within", "phases"] as const) {
          const { points, unit, used } = await readStability(campaignId, stabilityQuery.parse({ ...asked, view, confidence: DEVIATION_LEVEL }));
          const result = view === "within" ? "overlapping Allan deviation within phases" : "overlapping Allan deviation from phase to phase";
          yield points.map(({ tauS, deviation, lower, upper, n, noise }) =>
            cells({ ...about, result, tauS, value: deviation, lower, upper, level: DEVIATION_LEVEL, unit, n, note: `${noise}; ${used}` }),
          );
        }
      }
    }
    const { items } = await readBackToAir(campaignId);
    yield items.map(({ at, cycle, shiftPpm, shiftU }) =>
      cells({ quantity: "f0", medium: "air", result: "shift of the air reference from its baseline", at, value: shiftPpm, u: shiftU, unit: "ppm", note: `cycle ${cycle}` }),
    );
  }
  return { name: "results", columns: COLUMNS, rows: results() };
}

function driftRow({ slopePerDay, u, lower, upper, unit, n, used }: Awaited<ReturnType<typeof readDrift>>): Row {
  return { result: "drift a day, generalised least squares", value: slopePerDay, u, lower, upper, level: DRIFT_LEVEL, unit: unit === "1" ? "1/d" : `${unit}/d`, n, note: used };
}
