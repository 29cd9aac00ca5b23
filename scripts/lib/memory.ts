import fs from "node:fs";

/** Memory that a process holds at present, in MB; 0 when there is none, or no /proc to ask. */
export function megabytesOf(pid: number): number {
  return Math.round(Number(/^VmRSS:\s+(\d+) kB/m.exec(read(`/proc/${pid}/status`))?.[1] ?? 0) / 1024);
}

export const childrenOf = (pid: number): number[] => read(`/proc/${pid}/task/${pid}/children`).split(" ").filter(Boolean).map(Number);

function read(file: string): string {
  try {
    return fs.readFileSync(file, "utf8");
  } catch {
    return "";
  }
}
