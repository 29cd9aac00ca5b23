import fs from "node:fs";
import path from "node:path";
import { PlainError, run } from "./run.mjs";

/** @typedef {{ version?: string, optional?: boolean }} LockedPackage */
/** @typedef {{ packages?: Record<string, LockedPackage> }} Lock */

/**
 * Installs the node modules when they differ from the lock file.
 *
 * @param {string} root
 * @param {import("./console.mjs").Step} step
 * @param {AbortSignal} [signal]
 */
export async function ensureModules(root, step, signal) {
  if (!modulesAreStale(readLock(root, "package-lock.json"), readLock(root, "node_modules/.package-lock.json"))) return;
  await step("Installing node modules (about a minute)", async () => {
    // The build needs the development modules too, whatever NODE_ENV says.
    const args = ["ci", "--include=dev", "--no-audit", "--no-fund"];
    const { code, output } = await run("npm", args, { cwd: root, signal });
    if (code !== 0) throw new PlainError(`npm ci failed:\n${output.trim().split("\n").slice(-15).join("\n")}`);
  });
}

/**
 * Whether what npm says it installed is anything but what the lock file asks for. npm writes its own record last, so
 * an installation that was cut short has none. Optional packages are for some machines only and may be absent.
 *
 * @param {Lock | undefined} wanted
 * @param {Lock | undefined} installed
 */
export function modulesAreStale(wanted, installed) {
  if (!wanted) throw new PlainError("package-lock.json is missing.");
  if (!installed) return true;
  const has = installed.packages ?? {};
  const wants = Object.entries(wanted.packages ?? {}).filter(([place]) => place !== "");
  return (
    wants.some(([place, { version, optional }]) => has[place]?.version !== version && !(optional && !has[place])) ||
    Object.keys(has).some((place) => !wanted.packages?.[place])
  );
}

/** @param {string} root @param {string} file @returns {Lock | undefined} */
function readLock(root, file) {
  const place = path.join(root, file);
  return fs.existsSync(place) ? JSON.parse(fs.readFileSync(place, "utf8")) : undefined;
}
