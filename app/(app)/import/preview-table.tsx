import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Empty } from "@/components/ui/states";
import { formatCount, formatNumber, NO_VALUE, plural } from "@/lib/format";
import type { Beginning, Preview, PreviewRow } from "@/lib/imports/preview";
import { RefusedRows } from "./refused-rows";

const SHOWN = 8;

const number = (value: number | null, decimals: number) => (value === null ? NO_VALUE : formatNumber(value, { decimals }));

const LINE: TableColumn<PreviewRow> = { id: "line", head: "Line", slot: "x", align: "right", width: 60, cell: ({ line }) => formatCount(line) };
const AT: TableColumn<PreviewRow> = { id: "at", head: "Time / UTC", slot: "a", width: 210, cell: ({ at }) => <span className="num">{at.replace("T", " ").replace("Z", "")}</span> };
const MEDIUM: TableColumn<PreviewRow> = { id: "medium", head: "Medium", slot: "b", cell: ({ medium }) => medium };
const CYCLE: TableColumn<PreviewRow> = { id: "cycle", head: "Cycle", slot: "x", align: "right", width: 70, cell: ({ cycle }) => (cycle === null ? NO_VALUE : formatCount(cycle)) };
const TEMPERATURE: TableColumn<PreviewRow> = { id: "t", head: "Temperature / °C", slot: "d", align: "right", width: 140, cell: ({ temperatureC }) => number(temperatureC, 3) };

const VALUES: readonly TableColumn<PreviewRow>[] = [
  LINE,
  AT,
  MEDIUM,
  CYCLE,
  { id: "f0", head: <><i>f</i>₀ / Hz</>, slot: "c", align: "right", width: 140, cell: ({ f0Hz }) => number(f0Hz, 5) },
  { id: "q", head: <i>Q</i>, slot: "x", align: "right", width: 110, cell: ({ q }) => number(q, 2) },
  TEMPERATURE,
];
const SWEEPS: readonly TableColumn<PreviewRow>[] = [LINE, AT, MEDIUM, CYCLE, { id: "points", head: "Points", slot: "c", align: "right", width: 90, cell: ({ points }) => number(points, 0) }, TEMPERATURE];

/** The first rows as an import would read them, or why it would not. */
export function PreviewTable({ preview: { layout, rows, errors, ignored }, beginning }: { preview: Preview; beginning: Beginning }) {
  const first = beginning.whole ? "The" : "The first";
  if (errors.length > 0) {
    const bad = errors.slice(0, 20).map((error) => ("line" in error ? { path: `line ${error.line}${error.column ? `, ${error.column}` : ""}`, message: error.message } : error));
    return <RefusedRows again={false} detail={layout ? `${formatCount(errors.length)} ${plural(errors.length, "cell")} of the ${beginning.whole ? "" : "first "}${formatCount(beginning.rows.length)} rows cannot be read so.` : "Not all columns that are needed are named yet."} errors={bad} errorCount={errors.length} />;
  }
  if (rows.length === 0) return <Empty>There are no rows below the names of the columns.</Empty>;
  return (
    <>
      <p className="say-small mb-3">
        {first} {formatCount(beginning.rows.length)} rows read well{layout === "values" ? "" : ` and make ${formatCount(rows.length)} ${plural(rows.length, "sweep")}`}.
        {ignored.length > 0 && ` Left out: ${ignored.slice(0, 6).join(", ")}${ignored.length > 6 ? " …" : ""}.`}
      </p>
      <DataTable label="The first rows as they will be imported" columns={layout === "values" ? VALUES : SWEEPS} rows={rows.slice(0, SHOWN)} rowKey={({ line }) => String(line)} />
    </>
  );
}
