"use client";

import { useId, useRef, useState, type ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";
import { PowerOfTen } from "@/components/ui/quantity";
import { formatNumber } from "@/lib/format";
import { savePng, saveText, svgOf, tableAsCsv } from "./save";

export type TwinColumn = { head: string; right?: boolean };
export type TwinRow = readonly (string | number | null)[];
/** The plot as a table: the same numbers, for eyes and for files. Cells are as exact as the data; `shown` writes them for the page. */
export type Twin = { columns: readonly TwinColumn[]; rows: readonly TwinRow[]; shown?: (value: string | number | null, column: number) => ReactNode };

type PlotProps = {
  /** Name of the plot. */
  label: string;
  /** What it says, in a sentence. */
  sentence?: ReactNode;
  /** File name without ending. */
  file: string;
  twin: () => Twin;
  /** What the cursor stands on, in the line under the drawing. */
  reading?: ReactNode;
  className?: string;
  children: ReactNode;
};

const MOST_ROWS_SHOWN = 500;

/** Eight significant digits; far from one as a power of ten. */
function asShown(value: string | number | null): ReactNode {
  if (typeof value !== "number") return value;
  if (value !== 0 && (Math.abs(value) < 1e-3 || Math.abs(value) >= 1e9)) return <PowerOfTen value={value} decimals={2} />;
  return formatNumber(Number(value.toPrecision(8)));
}

/** Frame of every plot: the drawing, its sentence, its table, and the offers Table, SVG, PNG and CSV. */
export function Plot({ label, sentence, file, twin, reading, className, children }: PlotProps) {
  const [open, setOpen] = useState(false);
  const drawing = useRef<HTMLDivElement>(null);
  const tableId = useId();
  const data = open ? twin() : undefined;
  return (
    <figure className={classNames("plot", className)} aria-label={label}>
      <div ref={drawing}>{children}</div>
      <div className="plot-reading">
        <span className="num grow whitespace-normal" aria-live="polite">{reading}</span>
        <div className="offers" role="group" aria-label={`${label}, as`}>
          <button type="button" aria-expanded={open} aria-controls={tableId} onClick={() => setOpen(!open)}>Table</button>
          <button type="button" onClick={() => saveText(`${file}.svg`, "image/svg+xml", svgOf(drawing.current, label))}>SVG</button>
          <button type="button" onClick={() => void savePng(`${file}.png`, drawing.current, label)}>PNG</button>
          <button type="button" onClick={() => saveText(`${file}.csv`, "text/csv", tableAsCsv(twin()))}>CSV</button>
        </div>
      </div>
      {sentence && <figcaption className="caption">{sentence}</figcaption>}
      <div id={tableId}>
        {data && (
          <div className="plot-twin" tabIndex={0} role="region" aria-label={`${label}, table`}>
            <table className="data-table">
              <thead>
                <tr>{data.columns.map(({ head, right }) => <th key={head} scope="col" className={right ? "right" : undefined}>{head}</th>)}</tr>
              </thead>
              <tbody>
                {data.rows.slice(0, MOST_ROWS_SHOWN).map((row, i) => (
                  <tr key={i}>
                    {row.map((value, column) => (
                      <td key={column} className={data.columns[column]?.right ? "right num" : undefined}>{data.shown ? data.shown(value, column) : asShown(value)}</td>
                    ))}
                  </tr>
                ))}
              </tbody>
            </table>
            {data.rows.length > MOST_ROWS_SHOWN && <p className="caption">The first {MOST_ROWS_SHOWN} of {data.rows.length} rows; all of them are in the CSV.</p>}
          </div>
        )}
      </div>
    </figure>
  );
}
