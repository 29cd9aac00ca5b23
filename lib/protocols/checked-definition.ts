import { randomBytes } from "node:crypto";
import { invalid } from "@/lib/errors";
import { type Definition, type DefinitionInput, parseDefinition } from "@/lib/protocol/schema";

/** The definition with every id and default. @throws AppError 400 naming each mistake, `definition.` in front of its path. */
export function checkedDefinition(given: DefinitionInput): Definition {
  const parsed = parseDefinition(given, () => randomBytes(5).toString("hex"));
  if (parsed.ok) return parsed.definition;
  throw invalid(parsed.errors.slice(0, 50).map(({ path, message }) => ({ path: path ? `definition.${path}` : "definition", message })));
}
