import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { isAlive, markOf } from "@/scripts/lib/processes.mjs";
import { childrenOf, claim, RunLock } from "@/scripts/lib/run-lock.mjs";
import { delayMs, supervise } from "@/scripts/lib/supervise.mjs";

let home: string;
let stop: (() => Promise<void>) | undefined;

beforeEach(() => {
  home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-supervise-"));
});

afterEach(async () => {
  await stop?.();
  stop = undefined;
  fs.rmSync(home, { recursive: true });
});

function begin(script: string, onStart: (name: string, pid: number) => void, notice: (line: string) => void = () => undefined) {
  const service = { name: "part", args: ["-e", script], env: process.env, graceMs: 300 };
  stop = supervise(service, { root: home, logDirectory: home, notice, onStart }).stop;
}

const log = () => fs.readFileSync(path.join(home, "part.log"), "utf8");

test("waits twice as long after each failure, at most half a minute", () => {
  expect([1, 2, 3, 4, 5, 6, 7, 8, 1000].map(delayMs)).toEqual([500, 1000, 2000, 4000, 8000, 16_000, 30_000, 30_000, 30_000]);
});

test("a part that is killed starts again, and it is said so", async () => {
  const started: number[] = [];
  const notices: string[] = [];
  begin("setInterval(() => {}, 1000)", (_name, pid) => started.push(pid), (line) => notices.push(line));
  process.kill(started[0]!, "SIGKILL");
  await vi.waitFor(() => expect(started).toHaveLength(2), { timeout: 5000 });
  expect(notices).toEqual([expect.stringContaining("part was ended by SIGKILL; starting it again in 0.5 s")]);
  expect(markOf(started[1]!)).toBeDefined();
});

test("what a part prints is in its log, line by line with the time", async () => {
  begin("console.log('first'); console.error('second'); setInterval(() => {}, 1000)", () => undefined);
  await vi.waitFor(() => expect(log()).toMatch(/^\d{4}-\d\d-\d\dT\S+Z first$/m), { timeout: 5000 });
  await vi.waitFor(() => expect(log()).toMatch(/Z second$/m), { timeout: 5000 });
});

test("a part that will not end is forced, and does not start again", async () => {
  const started: number[] = [];
  begin("process.on('SIGTERM', () => {}); console.log('ready'); setInterval(() => {}, 1000)", (_name, pid) => started.push(pid));
  await vi.waitFor(() => expect(log()).toContain("ready"), { timeout: 5000 });
  const mark = markOf(started[0]!);
  await stop?.();
  stop = undefined;
  await vi.waitFor(() => expect(mark && isAlive(mark)).toBe(false), { timeout: 5000 });
  expect(started).toHaveLength(1);
});

test("a second claim on a data folder is told who has it and where that one answers", async () => {
  const lock = await claim(home);
  if (!(lock instanceof RunLock)) throw new Error("an empty folder was refused");
  lock.publish("http://127.0.0.1:3000");
  expect(await claim(home)).toEqual({ heldBy: { ...markOf(process.pid), address: "http://127.0.0.1:3000" } });
  lock.release();
  expect(await claim(home)).toBeInstanceOf(RunLock);
});

test("a claim left by a crash is taken over, even when its number is in use again, and its children are ended", async () => {
  const pids: number[] = [];
  const lost = await claim(home);
  if (!(lost instanceof RunLock)) throw new Error("an empty folder was refused");
  begin("setInterval(() => {}, 1000)", (name, pid) => {
    pids.push(pid);
    if (pids.length === 1) lost.remember(name, pid);
  });
  const orphan = childrenOf(home).part;
  fs.writeFileSync(path.join(home, "run.json"), JSON.stringify({ pid: process.pid, born: "of another time" }));

  expect(await claim(home)).toBeInstanceOf(RunLock);
  await vi.waitFor(() => expect(orphan && isAlive(orphan)).toBe(false), { timeout: 5000 });
});
