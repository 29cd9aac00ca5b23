import { UniqueConstraintError } from "sequelize";
import { conflict } from "@/lib/errors";

type Double = { constraint: string; /** Of the body, the one that holds what is taken. */ field?: string; message: string };

/**
 * Runs a write and turns what the database refuses as a double into a conflict in our words.
 * Only the named constraint is meant; anything else stays the error it was. The conflict names the field, if it was given.
 */
export async function refuseDouble<T>({ constraint, field, message }: Double, write: () => Promise<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if (constraintOf(error) === constraint) throw conflict(message, "already-there", field ? { errors: [{ path: field, message: "is taken already" }] } : {});
    throw error;
  }
}

/** Name of the constraint that PostgreSQL said was broken. */
export function constraintOf(error: unknown): string | undefined {
  const cause: unknown = error instanceof UniqueConstraintError ? error.parent : error instanceof Error && "parent" in error ? error.parent : error;
  if (typeof cause !== "object" || cause === null || !("constraint" in cause)) return undefined;
  return typeof cause.constraint === "string" ? cause.constraint : undefined;
}
