import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { FIELD_NAMES, fieldInfo, type Field } from "@/lib/imports/fields";
import type { Beginning } from "@/lib/imports/preview";
import type { Mapping } from "@/lib/imports/schema";

type Row = { name: string; shown: string; use: Mapping[string]; taken: ReadonlySet<Field>; onUse: (use: Mapping[string]) => void };

const COLUMNS: readonly TableColumn<Row>[] = [
  { id: "name", head: "Column", slot: "a", cell: ({ name }) => <b>{name}</b> },
  { id: "shown", head: "First values", slot: "w", cell: ({ shown }) => <span className="num block overflow-hidden text-ellipsis text-ink2">{shown}</span> },
  {
    id: "field",
    head: "Is",
    slot: "c",
    width: 250,
    cell: ({ name, use, taken, onUse }) => (
      <select className="control" aria-label={`${name} is`} value={use?.field ?? ""} onChange={({ target }) => onUse(target.value ? { field: target.value as Field, unit: fieldInfo(target.value as Field).units[0].name } : null)}>
        <option value="">left out</option>
        {FIELD_NAMES.filter((field) => field === use?.field || !taken.has(field)).map((field) => <option key={field} value={field}>{fieldInfo(field).words}</option>)}
      </select>
    ),
  },
  {
    id: "unit",
    head: "In",
    slot: "d",
    width: 150,
    cell: ({ name, use, onUse }) =>
      use && fieldInfo(use.field).units.length > 1 && (
        <select className="control" aria-label={`Unit of ${name}`} value={use.unit ?? fieldInfo(use.field).units[0].name} onChange={({ target }) => onUse({ field: use.field, unit: target.value })}>
          {fieldInfo(use.field).units.map(({ name: unit }) => <option key={unit}>{unit}</option>)}
        </select>
      ),
  },
];

type Props = { beginning: Beginning; mapping: Mapping; onMapping: (mapping: Mapping) => void };

/** What each column of the file is, and in which unit. */
export function ColumnsTable({ beginning: { header, rows }, mapping, onMapping }: Props) {
  const taken = new Set(Object.values(mapping).flatMap((use) => (use ? [use.field] : [])));
  const names = header.cells.map((cell) => cell.trim());
  const given = names.flatMap((name, index): Row[] =>
    name === "" || names.indexOf(name) !== index
      ? []
      : [{ name, shown: rows.slice(0, 3).map(({ cells }) => (cells[index] ?? "").slice(0, 24)).join(", "), use: mapping[name] ?? null, taken, onUse: (use) => onMapping({ ...mapping, [name]: use }) }],
  );
  return <DataTable label="Columns of the file" columns={COLUMNS} rows={given} rowKey={({ name }) => name} />;
}
