"use client";

import { rowSortingFeature, tableFeatures, useTable, type ColumnDef, type RowData } from "@tanstack/react-table";
import { useRouter } from "next/navigation";
import { useMemo, type KeyboardEvent, type ReactNode } from "react";
import { classNames } from "./class-names";
import { Loading, Problem } from "./states";
import { TablePages, type PageOf } from "./table-pages";

/** Where a column goes when the table is narrow: a, b above; c, d below; w the whole width; x is left out. */
export type Slot = "a" | "b" | "c" | "d" | "w" | "x";

export type TableColumn<Row> = {
  id: string;
  /** The unit stands in the head: `Shift / mHz`. Empty over verbs. */
  head: ReactNode;
  cell: (row: Row) => ReactNode;
  align?: "right";
  slot?: Slot;
  sortable?: boolean;
  width?: number;
};

export type DataTableProps<Row> = {
  /** Read by screen readers; `describedBy` may say more. */
  label: string;
  /** Stable between renders. */
  columns: readonly TableColumn<Row>[];
  /** Undefined while they are read for the first time. */
  rows: readonly Row[] | undefined;
  rowKey: (row: Row) => string;
  rowHref?: (row: Row) => string;
  selectedKey?: string;
  /** `end` ascending, `-end` descending; sorting is the server's. */
  sort?: string;
  onSort?: (sort: string) => void;
  page?: PageOf;
  onPage?: (page: number) => void;
  empty?: ReactNode;
  error?: unknown;
  onRetry?: () => void;
  refreshing?: boolean;
  /** 48 px rows that hold a strip. */
  tall?: boolean;
  /** A row that sums up, under an ink line. */
  sum?: ReactNode;
};

const features = tableFeatures({ rowSortingFeature, columnMeta: {} as { column: TableColumn<unknown> } });
const NO_ROWS: readonly never[] = [];

/** A table with our look. Old rows stay while new ones are read or when reading them failed. */
export function DataTable<Row extends RowData>(props: DataTableProps<Row>) {
  const { label, columns, rows, rowKey, rowHref, selectedKey, sort, onSort, page, onPage, empty, error, onRetry, refreshing, tall, sum } = props;
  const router = useRouter();

  const definitions = useMemo<ColumnDef<typeof features, Row, unknown>[]>(
    () =>
      columns.map((column) => ({
        id: column.id,
        accessorFn: (row: Row) => row,
        header: () => column.head || <span className="visually-hidden">What can be done</span>,
        cell: ({ row }: { row: { original: Row } }) => column.cell(row.original),
        enableSorting: Boolean(column.sortable && onSort),
        meta: { column: column as TableColumn<unknown> },
      })),
    [columns, onSort],
  );
  const sorting = useMemo(() => (sort ? [{ id: sort.replace(/^-/, ""), desc: sort.startsWith("-") }] : []), [sort]);
  const table = useTable({
    features,
    columns: definitions,
    data: (rows ?? NO_ROWS) as Row[],
    getRowId: rowKey,
    manualSorting: true,
    enableSortingRemoval: false,
    enableMultiSort: false,
    state: { sorting },
    onSortingChange: (updater) => {
      const [next] = typeof updater === "function" ? updater(sorting) : updater;
      if (next) onSort?.(next.desc ? `-${next.id}` : next.id);
    },
  });

  const problem = error ? <Problem error={error} onRetry={onRetry} /> : null;
  if (!rows) return problem ?? <Loading label={label} height={180} />;
  if (rows.length === 0) return problem ?? <>{empty}</>;

  return (
    <div className="table-box">
      {problem}
      <table className={classNames("data-table lines", tall && "tall", columns.some(({ width }) => width) && "set-widths")} aria-label={label} aria-busy={refreshing || undefined}>
        <colgroup>{columns.map(({ id, width }) => <col key={id} style={width ? { width } : undefined} />)}</colgroup>
        <thead>
          {table.getHeaderGroups().map((group) => (
            <tr key={group.id}>
              {group.headers.map((header) => {
                const direction = header.column.getIsSorted();
                const { align } = header.column.columnDef.meta?.column ?? {};
                return (
                  <th key={header.id} scope="col" className={align} aria-sort={direction ? (direction === "desc" ? "descending" : "ascending") : undefined}>
                    {header.column.getCanSort() ? (
                      <button type="button" onClick={header.column.getToggleSortingHandler()}>
                        <table.FlexRender header={header} />
                        {direction && <span aria-hidden="true">{direction === "desc" ? " ↓" : " ↑"}</span>}
                      </button>
                    ) : (
                      <table.FlexRender header={header} />
                    )}
                  </th>
                );
              })}
            </tr>
          ))}
        </thead>
        <tbody onKeyDown={moveBetweenRows}>
          {table.getRowModel().rows.map((row) => {
            const href = rowHref?.(row.original);
            return (
              <tr
                key={row.id}
                aria-selected={row.id === selectedKey || undefined}
                className={href && "cursor-pointer"}
                onClick={href ? (event) => followRow(event.target, () => router.push(href)) : undefined}
              >
                {row.getAllCells().map((cell) => {
                  const { align, slot } = cell.column.columnDef.meta?.column ?? {};
                  return (
                    <td key={cell.id} className={classNames(align, align && "num", slot && `slot-${slot}`)}>
                      <table.FlexRender cell={cell} />
                    </td>
                  );
                })}
              </tr>
            );
          })}
          {sum}
        </tbody>
      </table>
      {page && onPage && <TablePages page={page} onPage={onPage} label={label} />}
    </div>
  );
}

/** A press on a row follows it, unless it was for something inside the row or marked text. */
function followRow(target: EventTarget, follow: () => void) {
  if (target instanceof Element && target.closest("a, button, input, select, [tabindex]")) return;
  if (window.getSelection()?.toString()) return;
  follow();
}

/** Up and down go to the first link or button of the next row; Home and End to the ends. */
function moveBetweenRows(event: KeyboardEvent<HTMLTableSectionElement>) {
  if (!["ArrowUp", "ArrowDown", "Home", "End"].includes(event.key) || (event.target as Element).matches("input, select, textarea, svg")) return;
  const stops = [...event.currentTarget.rows].map((row) => row.querySelector<HTMLElement>("a[href], button")).filter((stop) => stop !== null);
  const here = stops.findIndex((stop) => stop.closest("tr")?.contains(event.target as Node));
  const next = { ArrowUp: here - 1, ArrowDown: here + 1, Home: 0, End: stops.length - 1 }[event.key];
  const stop = next === undefined ? undefined : stops[next];
  if (!stop) return;
  event.preventDefault();
  stop.focus();
}
