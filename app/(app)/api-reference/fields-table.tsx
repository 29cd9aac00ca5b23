import { WithCode } from "@/components/ui/with-code";
import type { SchemaField } from "@/lib/http/schema-fields";

type FieldsTableProps = { label: string; fields: readonly (SchemaField & { where?: string })[]; /** Names that have a head of their own on the page. */ schemas: ReadonlySet<string> };

/** Fields with type, range and whether they must be there; nested ones are set in. */
export function FieldsTable({ label, fields, schemas }: FieldsTableProps) {
  return (
    <div className="table-box">
      <table className="data-table lines fields" aria-label={label}>
        <thead>
          <tr><th scope="col">Name</th><th scope="col">Type</th><th scope="col">Allowed</th><th scope="col"><span className="visually-hidden">Must be there</span></th></tr>
        </thead>
        <tbody>
          {fields.map(({ name, depth, type, range, required, note, ref, between, where }, i) =>
            between ? (
              <tr key={i} className="between"><td colSpan={4} className="slot-w" style={{ paddingLeft: depth * 18 }}>{name}</td></tr>
            ) : (
              <tr key={i}>
                <td className="slot-a" style={{ paddingLeft: depth * 18 }}><code>{name}</code>{where && where !== "query" && <span className="text-ink3"> {where}</span>}</td>
                <td className="slot-c">{ref && schemas.has(ref) ? <a href={`#schema-${ref}`}>{type}</a> : type}</td>
                <td className="slot-w"><WithCode>{[range, note].filter(Boolean).join(". ")}</WithCode></td>
                <td className="slot-b">{required ? "required" : ""}</td>
              </tr>
            ),
          )}
        </tbody>
      </table>
    </div>
  );
}
