/** The one table of who may do what: pages, routes and actions read it, and nothing else decides. */

export type Role = "administrator" | "researcher" | "operator" | "viewer";

export const ROLES = ["administrator", "researcher", "operator", "viewer"] as const satisfies readonly Role[];

const everybody: readonly Role[] = ROLES;
const operators: readonly Role[] = ["administrator", "researcher", "operator"];
const researchers: readonly Role[] = ["administrator", "researcher"];
const administrators: readonly Role[] = ["administrator"];

export const PERMISSIONS = {
  /** Everything but people, tokens and the audit log. */
  read: everybody,
  "own settings": everybody,
  "answer tasks": operators,
  "handle alarms": operators,
  "record loads": operators,
  "record mounts": operators,
  "hold campaigns": operators,
  "resume campaigns": operators,
  "take over rigs": operators,
  "write notes": operators,
  "edit protocols": researchers,
  "edit campaigns": researchers,
  "stop campaigns": researchers,
  "set campaigns aside": researchers,
  "edit sensors": researchers,
  "edit liquids": researchers,
  "exclude readings": researchers,
  "fit again": researchers,
  "edit rigs": administrators,
  "agent tokens": administrators,
  people: administrators,
  settings: administrators,
  "audit log": administrators,
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof PERMISSIONS;

/**
 * What each page needs, by its address; "public" needs no sign-in. Whoever lacks it is told whose page it is. A server action
 * would stand here too; there is none, as every change goes through a call of the API.
 */
export const PAGES = {
  "/": "read",
  "/alarms": "read",
  "/alarms/[id]": "read",
  "/api-reference": "read",
  "/api-reference/[group]": "read",
  "/audit": "audit log",
  "/campaigns": "read",
  "/campaigns/[id]": "read",
  "/campaigns/[id]/fits": "read",
  "/campaigns/[id]/readings/[sequence]/[index]": "read",
  "/campaigns/[id]/stability": "read",
  "/campaigns/new": "edit campaigns",
  "/find": "read",
  "/forgotten-password": "public",
  "/import": "edit campaigns",
  "/import/[id]": "read",
  "/invitation/[token]": "public",
  "/liquids": "read",
  "/liquids/[id]": "read",
  "/liquids/[id]/edit": "edit liquids",
  "/liquids/[id]/lots/[lotId]/edit": "edit liquids",
  "/liquids/[id]/lots/new": "edit liquids",
  "/liquids/new": "edit liquids",
  "/new-password/[token]": "public",
  "/people": "people",
  "/problems": "public",
  "/problems/[code]": "public",
  "/protocols": "read",
  "/protocols/[id]": "read",
  "/protocols/[id]/edit": "edit protocols",
  "/protocols/new": "edit protocols",
  "/rigs": "read",
  "/rigs/[id]": "read",
  "/rigs/[id]/edit": "edit rigs",
  "/rigs/new": "edit rigs",
  "/sensors": "read",
  "/sensors/[id]": "read",
  "/sensors/[id]/edit": "edit sensors",
  "/sensors/new": "edit sensors",
  "/settings": "own settings",
  "/settings/mail": "settings",
  "/sign-in": "public",
  "/tasks": "read",
} as const satisfies Record<string, Permission | "public">;

export const may = (role: Role, permission: Permission): boolean => (PERMISSIONS[permission] as readonly Role[]).includes(role);

/** Whether a role may open the page of that address; a page that the table does not name is nobody's. */
export function mayOpen(role: Role, address: string): boolean {
  const needed = (PAGES as Readonly<Record<string, Permission | "public">>)[address];
  return needed === "public" || (needed !== undefined && may(role, needed));
}

/** Roles that hold a permission, in words: "a researcher or an administrator". */
export function whoMay(permission: Permission): string {
  const article = (role: Role) => (/^[aeiou]/.test(role) ? `an ${role}` : `a ${role}`);
  return PERMISSIONS[permission].map(article).toReversed().join(" or ");
}
