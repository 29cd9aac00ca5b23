import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { LinkButton } from "@/components/ui/button";
import { formatCount } from "@/lib/format";

type Bad = { path: string; message: string };

const COLUMNS: readonly TableColumn<Bad>[] = [
  { id: "where", head: "Where", slot: "a", width: 220, cell: ({ path }) => <span className="num">{path}</span> },
  { id: "why", head: "Why", slot: "w", cell: ({ message }) => <span className="whitespace-normal">{message}</span> },
];

/** Why a file was refused: every bad row with its line and the reason. */
export function RefusedRows({ detail, errors, errorCount, again = true }: { detail: string; errors: readonly Bad[]; errorCount: number; again?: boolean }) {
  return (
    <div role="alert">
      <p className="say-small">{detail}</p>
      {errors.length > 0 && (
        <div className="mt-3">
          <DataTable label="What is wrong with the file" columns={COLUMNS} rows={errors} rowKey={({ path, message }) => `${path} ${message}`} />
        </div>
      )}
      {errorCount > errors.length && <p className="small mt-1 text-ink2">These are the first {formatCount(errors.length)} of {formatCount(errorCount)}.</p>}
      {again && <div className="buttons mt-3"><LinkButton href="/import">Import again</LinkButton></div>}
    </div>
  );
}
