import { notAllowed } from "@/lib/errors";
import { may, whoMay, type Permission, type Role } from "@/lib/permissions";

/** The person who does something, as use cases take it. */
export type Actor = { id: string; name: string; role: Role };

/** Longreed itself: jobs, limits, the fast path. */
export type By = Actor | "longreed";

/** @throws AppError 403 when the role does not hold the permission. */
export function demand(by: Actor, permission: Permission): void {
  if (!may(by.role, permission)) throw notAllowed(`This needs ${whoMay(permission)}; you are signed in as ${by.role}`);
}

export const nameOf = (by: By): string => (by === "longreed" ? "Longreed" : by.name);
