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
  "edit rigs": administrators,
  "agent tokens": administrators,
  people: administrators,
  settings: administrators,
  "audit log": administrators,
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof PERMISSIONS;

export const may = (role: Role, permission: Permission): boolean => (PERMISSIONS[permission] as readonly Role[]).includes(role);

/** Roles that hold a permission, in words: "a researcher or an administrator". */
export function whoMay(permission: Permission): string {
  const article = (role: Role) => (/^[aeiou]/.test(role) ? `an ${role}` : `a ${role}`);
  return PERMISSIONS[permission].map(article).toReversed().join(" or ");
}
