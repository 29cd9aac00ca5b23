import { spawn } from "node:child_process";
import { endProcess, markOf } from "./processes.mjs";
import { openLog } from "./log.mjs";

/** A child that lived this long was well: its next failure counts as the first. */
const steadyMs = 60_000;

/**
 * @typedef {object} Service
 * @property {string} name
 * @property {string[]} args For Node itself.
 * @property {NodeJS.ProcessEnv} env
 * @property {number} [graceMs] How long it may take to end by itself.
 *
 * @typedef {object} Supervisor
 * @property {string} root
 * @property {string} logDirectory
 * @property {(line: string) => void} notice
 * @property {(name: string, pid: number) => void} onStart
 */

/**
 * How long to wait before the start after the n-th failure in a row: 0.5 s, then twice as long each time, at most 30 s.
 *
 * @param {number} failures
 */
export function delayMs(failures) {
  return Math.min(500 * 2 ** (failures - 1), 30_000);
}

/**
 * Runs a service until it is stopped: whatever ends it, it is started again. Its output goes to a log of its own.
 *
 * @param {Service} service
 * @param {Supervisor} supervisor
 * @returns {{ stop: () => Promise<void> }}
 */
export function supervise(service, { root, logDirectory, notice, onStart }) {
  const log = openLog(logDirectory, service.name);
  let failures = 0;
  let stopping = false;
  /** @type {NodeJS.Timeout | undefined} */
  let waiting;
  /** @type {import("node:child_process").ChildProcess | undefined} */
  let child;
  begin();

  return {
    async stop() {
      stopping = true;
      clearTimeout(waiting);
      const mark = child?.pid ? markOf(child.pid) : undefined;
      if (mark) await endProcess(mark, service.graceMs ?? 10_000);
      log.close();
    },
  };

  function begin() {
    const begun = Date.now();
    // A group of its own: Ctrl-C in the terminal reaches only the supervisor, which ends its children in order.
    child = spawn(process.execPath, service.args, {
      cwd: root,
      env: service.env,
      detached: true,
      stdio: ["ignore", "pipe", "pipe"],
    });
    child.stdout?.setEncoding("utf8").on("data", log.write);
    child.stderr?.setEncoding("utf8").on("data", log.write);
    child.once("error", (error) => log.line(error.message));
    child.once("exit", (code, signal) => {
      if (stopping) return;
      failures = Date.now() - begun > steadyMs ? 1 : failures + 1;
      const wait = delayMs(failures);
      const how = signal ? `was ended by ${signal}` : `ended with code ${code}`;
      notice(`${service.name} ${how}; starting it again in ${wait / 1000} s (see ${log.file})`);
      log.line(`-- ${how}`);
      waiting = setTimeout(begin, wait);
    });
    if (child.pid) onStart(service.name, child.pid);
  }
}
