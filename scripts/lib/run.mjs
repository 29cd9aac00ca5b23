import { spawn } from "node:child_process";

/**
 * Runs a program to its end and answers what it printed. Output goes to `onLine` as it comes, if given.
 *
 * @param {string} file
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, detached?: boolean, signal?: AbortSignal, onLine?: (line: string) => void, onStart?: (pid: number) => void }} [options]
 * @returns {Promise<{ code: number, output: string }>}
 */
export function run(file, args, { onLine, onStart, ...options } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(file, args, { ...options, stdio: ["ignore", "pipe", "pipe"] });
    if (child.pid) onStart?.(child.pid);
    let output = "";
    let pending = "";
    /** @param {string} chunk */
    const take = (chunk) => {
      output += chunk;
      pending += chunk;
      const lines = pending.split("\n");
      pending = lines.pop() ?? "";
      if (onLine) lines.forEach(onLine);
    };
    child.stdout.setEncoding("utf8").on("data", take);
    child.stderr.setEncoding("utf8").on("data", take);
    child.on("error", reject);
    child.on("close", (code) => {
      if (onLine && pending) onLine(pending);
      resolve({ code: code ?? 1, output });
    });
  });
}

/**
 * Like `run`, but leaves the output alone: a server started by the program would keep a pipe open.
 *
 * @param {string} file
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv }} [options]
 * @returns {Promise<number>}
 */
export function runSilently(file, args, options = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(file, args, { ...options, stdio: "ignore" });
    child.on("error", reject);
    child.on("exit", (code) => resolve(code ?? 1));
  });
}

/** A failure whose message is all a person needs: printed without a stack. */
export class PlainError extends Error {}
