import type { DefinitionError } from "@/lib/protocol/schema";
import { type Draft, isFields } from "@/lib/protocols/draft";

/** Mistakes of one block, limit or of the protocol itself (id ""), by the field within it. */
export type FieldErrors = ReadonlyMap<string, string>;

const NONE: FieldErrors = new Map();
export const errorsOf = (errors: ReadonlyMap<string, FieldErrors>, id: string): FieldErrors => errors.get(id) ?? NONE;

/** Sorts mistakes by the block or limit that they are in, so that each is shown at its field wherever that has been moved. */
export function sortErrors(draft: Draft, errors: readonly DefinitionError[]): Map<string, Map<string, string>> {
  const sorted = new Map<string, Map<string, string>>();
  for (const { path, message } of errors) {
    const { id, field } = ownerOf(draft, path);
    const own = sorted.get(id) ?? new Map<string, string>();
    if (!own.has(field)) own.set(field, message);
    sorted.set(id, own);
  }
  return sorted;
}

/** The innermost block or limit on a path, and the field within it; id "" for a field of the protocol itself. */
export function ownerOf(draft: Draft, path: string): { id: string; field: string } {
  const keys = path === "" ? [] : path.split(".");
  let owner = { id: "", field: path };
  let value: unknown = draft;
  for (const [index, key] of keys.entries()) {
    value = isFields(value) || Array.isArray(value) ? (value as Readonly<Record<string, unknown>>)[key] : undefined;
    if (isFields(value) && typeof value.id === "string" && typeof value.kind === "string") owner = { id: value.id, field: keys.slice(index + 1).join(".") };
  }
  return owner;
}
