import { randomBytes } from "node:crypto";
import fs from "node:fs";
import path from "node:path";

/**
 * The secrets of the demo on this machine, made at the first call and readable by the owner only. The prefix lets a
 * real deployment refuse them.
 *
 * @param {string} dataDirectory
 * @returns {{ authSecret: string, databasePassword: string }}
 */
export function demoSecrets(dataDirectory) {
  const file = path.join(dataDirectory, "secrets.json");
  if (!fs.existsSync(file)) {
    const make = () => `demo-${randomBytes(32).toString("base64url")}`;
    writePrivately(file, { authSecret: make(), databasePassword: make() });
  }
  return JSON.parse(fs.readFileSync(file, "utf8"));
}

/**
 * Writes JSON that only the owner may read, whole or not at all.
 *
 * @param {string} file
 * @param {unknown} value
 */
export function writePrivately(file, value) {
  const draft = `${file}.new`;
  fs.writeFileSync(draft, `${JSON.stringify(value, null, 2)}\n`, { mode: 0o600 });
  fs.renameSync(draft, file);
}
