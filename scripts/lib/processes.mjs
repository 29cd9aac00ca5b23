import fs from "node:fs";

/** @typedef {{ pid: number, born: string }} ProcessMark Number and birth of a process: a number alone is used again. */

/**
 * The mark of a living process; `undefined` when there is none with this number.
 *
 * @param {number} pid
 * @returns {ProcessMark | undefined}
 */
export function markOf(pid) {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, "utf8");
    // Fields after the program's name, which may itself hold blanks and brackets: state is the third, birth the 22nd.
    const fields = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
    return fields[0] === "Z" ? undefined : { pid, born: `${bootOf()}:${fields[19]}` };
  } catch {
    return undefined;
  }
}

/** @param {ProcessMark} mark */
export function isAlive({ pid, born }) {
  return markOf(pid)?.born === born;
}

/**
 * Ends a process and all of its group: asks, then forces after `graceMs`.
 *
 * @param {ProcessMark} mark
 * @param {number} graceMs
 */
export async function endProcess(mark, graceMs) {
  send(mark, "SIGTERM");
  const deadline = Date.now() + graceMs;
  while (isAlive(mark) && Date.now() < deadline) await new Promise((resolve) => setTimeout(resolve, 25));
  if (isAlive(mark)) send(mark, "SIGKILL");
}

/** Signals the process and, where it leads a group, all of it. @param {ProcessMark} mark @param {NodeJS.Signals} signal */
function send(mark, signal) {
  if (!isAlive(mark)) return;
  for (const target of [-mark.pid, mark.pid]) {
    try {
      process.kill(target, signal);
      return;
    } catch {
      // It leads no group, or ended in between.
    }
  }
}

/**
 * The processes that carry this variable in their environment, which children inherit.
 *
 * @param {string} variable
 * @param {string} value
 * @returns {ProcessMark[]}
 */
export function markedProcesses(variable, value) {
  const entry = `${variable}=${value}`;
  return fs
    .readdirSync("/proc")
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid && environmentOf(name).includes(entry))
    .flatMap((name) => markOf(Number(name)) ?? []);
}

/** @param {string} pid */
function environmentOf(pid) {
  try {
    return fs.readFileSync(`/proc/${pid}/environ`, "utf8").split("\0");
  } catch {
    return [];
  }
}

function bootOf() {
  return fs.readFileSync("/proc/sys/kernel/random/boot_id", "utf8").trim();
}
