import fs from "node:fs";
import path from "node:path";
import { endProcess, isAlive, markOf } from "./processes.mjs";
import { writePrivately } from "./secrets.mjs";

/** @typedef {import("./processes.mjs").ProcessMark} ProcessMark */

/**
 * Claims a data folder for this process. Answers the holder instead when a living one has it; a lock that a crash
 * left is taken over, and the children it left running are ended.
 *
 * @param {string} dataDirectory
 * @returns {Promise<{ heldBy: ProcessMark & { address?: string } } | RunLock>}
 */
export async function claim(dataDirectory) {
  const file = path.join(dataDirectory, "run.json");
  const own = markOf(process.pid);
  if (!own) throw new Error("/proc tells nothing about this process");
  const draft = `${file}.${process.pid}`;
  writePrivately(draft, own);
  try {
    while (!linkedTo(draft, file)) {
      const holder = readHolder(file);
      if (holder && isAlive(holder)) return { heldBy: holder };
      fs.rmSync(file, { force: true });
    }
  } finally {
    fs.rmSync(draft);
  }
  await endOrphans(dataDirectory);
  return new RunLock(dataDirectory, own);
}

export class RunLock {
  /** @type {Map<string, ProcessMark>} */
  #children = new Map();
  #dataDirectory;
  #own;

  /** @param {string} dataDirectory @param {ProcessMark} own */
  constructor(dataDirectory, own) {
    this.#dataDirectory = dataDirectory;
    this.#own = own;
  }

  /** Lets a second start say where this one answers. @param {string} address */
  publish(address) {
    writePrivately(path.join(this.#dataDirectory, "run.json"), { ...this.#own, address });
  }

  /** Remembers a child so that the next start can end it if this process cannot. @param {string} name @param {number} pid */
  remember(name, pid) {
    const mark = markOf(pid);
    if (mark) this.#children.set(name, mark);
    writePrivately(childrenFile(this.#dataDirectory), Object.fromEntries(this.#children));
  }

  release() {
    fs.rmSync(childrenFile(this.#dataDirectory), { force: true });
    fs.rmSync(path.join(this.#dataDirectory, "run.json"), { force: true });
  }
}

/**
 * The children of the running laboratory by name.
 *
 * @param {string} dataDirectory
 * @returns {Record<string, ProcessMark>}
 */
export function childrenOf(dataDirectory) {
  const file = childrenFile(dataDirectory);
  return fs.existsSync(file) ? JSON.parse(fs.readFileSync(file, "utf8")) : {};
}

/** Makes the lock with its content in one act; false when there is one. @param {string} draft @param {string} file */
function linkedTo(draft, file) {
  try {
    fs.linkSync(draft, file);
    return true;
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "EEXIST") return false;
    throw error;
  }
}

/** @param {string} dataDirectory */
async function endOrphans(dataDirectory) {
  await Promise.all(Object.values(childrenOf(dataDirectory)).map((mark) => endProcess(mark, 5000)));
}

/** @param {string} dataDirectory */
function childrenFile(dataDirectory) {
  return path.join(dataDirectory, "children.json");
}

/** @param {string} file @returns {(ProcessMark & { address?: string }) | undefined} */
function readHolder(file) {
  try {
    return JSON.parse(fs.readFileSync(file, "utf8"));
  } catch {
    return undefined;
  }
}
