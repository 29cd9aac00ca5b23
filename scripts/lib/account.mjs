import { createHash } from "node:crypto";
import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { PlainError, run } from "./run.mjs";

/** Lets the server pass through folders that are open to root only. */
const passThrough = ["--inh-caps=+dac_read_search", "--ambient-caps=+dac_read_search"];

/** @typedef {{ wrapper: string[], uid?: number, gid?: number }} Account `wrapper` goes before a program's name. */

/**
 * A folder that belongs to the account of the PostgreSQL server: `wished`, or one under /var/tmp where the server's
 * account cannot get there. An existing cluster is never left for a new one.
 *
 * @param {string} wished
 * @returns {Promise<string>}
 */
export async function reachableDirectory(wished) {
  const name = createHash("sha256").update(path.resolve(wished)).digest("hex").slice(0, 12);
  const elsewhere = path.join("/var/tmp", `longreed-${name}`);
  if (fs.existsSync(path.join(elsewhere, "PG_VERSION"))) return elsewhere;

  const directory = prepare(wished);
  if (await wrapperFor(directory)) return directory;
  if (fs.existsSync(path.join(directory, "PG_VERSION"))) {
    throw new PlainError(`The PostgreSQL account cannot reach the cluster in ${directory}; open its parent folders.`);
  }
  return prepare(elsewhere);
}

/**
 * How to run the server on this folder: PostgreSQL refuses root, so root lends it the folder's owner.
 *
 * @param {string} directory
 * @returns {Promise<Account>}
 */
export async function clusterAccount(directory) {
  const wrapper = await wrapperFor(directory);
  if (!wrapper) throw new PlainError(`The PostgreSQL account cannot reach ${directory}.`);
  if (!isRoot()) return { wrapper };
  const { uid, gid } = fs.statSync(directory);
  return { wrapper, uid, gid };
}

/**
 * Gives a file to the server's account.
 *
 * @param {Account} account
 * @param {string} file
 */
export function passTo({ uid, gid }, file) {
  if (uid !== undefined && gid !== undefined) fs.chownSync(file, uid, gid);
}

export function isRoot() {
  return process.getuid?.() === 0;
}

/** @param {string} directory */
function prepare(directory) {
  fs.mkdirSync(directory, { recursive: true, mode: 0o700 });
  const { uid, gid } = ownerFor(directory);
  if (isRoot()) fs.chownSync(directory, uid, gid);
  else if (fs.statSync(directory).uid !== process.getuid?.()) {
    throw new PlainError(`${directory} belongs to another account; start as that account, or as root.`);
  }
  fs.chmodSync(directory, 0o700);
  return directory;
}

/** @param {string} directory @returns {Promise<string[] | undefined>} */
async function wrapperFor(directory) {
  if (!isRoot()) return [];
  const { uid, gid } = fs.statSync(directory);
  const change = ["setpriv", `--reuid=${uid}`, `--regid=${gid}`, "--clear-groups"];
  for (const wrapper of [change, [...change, ...passThrough]]) {
    const [file = "", ...args] = wrapper;
    // Not `test -w`: the kernel answers that question as if the account had no capabilities.
    const probe = await run(file, [...args, "test", "-d", `${directory}/.`], { cwd: "/" });
    if (probe.code === 0) return wrapper;
  }
  return undefined;
}

/** Root keeps the owner that a folder already has; a new one goes to Debian's account for the server. @param {string} directory */
function ownerFor(directory) {
  const { uid, gid } = fs.statSync(directory);
  if (uid !== 0 || !isRoot()) return { uid, gid };
  const line = fs.readFileSync("/etc/passwd", "utf8").split("\n").find((entry) => entry.startsWith("postgres:"));
  const fields = line?.split(":");
  if (!fields) throw new PlainError(`There is no account "postgres" on ${os.hostname()}; Debian's package makes it.`);
  return { uid: Number(fields[2]), gid: Number(fields[3]) };
}
