import type { Model } from "sequelize";

/** Sets what was given and differs; what is undefined stays. Answers the fields that changed, before and after, for the audit log. */
export function setGiven(record: Model, given: Readonly<Record<string, unknown>>): { before: Record<string, unknown>; after: Record<string, unknown> } | undefined {
  record.set(Object.fromEntries(Object.entries(given).filter(([, value]) => value !== undefined)));
  const changed = record.changed();
  if (!changed) return undefined;
  return {
    before: Object.fromEntries(changed.map((field) => [field, record.previous(field)])),
    after: Object.fromEntries(changed.map((field) => [field, record.get(field)])),
  };
}
