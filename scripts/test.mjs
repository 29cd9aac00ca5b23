import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { say, sinceStart, step } from "./lib/console.mjs";
import { PlainError, run } from "./lib/run.mjs";

const root = path.dirname(path.dirname(fileURLToPath(import.meta.url)));
process.chdir(root);

/** Holds the run's database, reports and every temporary file; also marks all processes of the run. */
const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-run-"));
fs.chmodSync(home, 0o711);
const distDir = ".next-test";
Object.assign(process.env, {
  TMPDIR: home,
  LONGREED_TEST_RUN: home,
  LONGREED_DIST_DIR: distDir,
  LONGREED_FULL: process.argv.includes("--full") ? "1" : "",
  [process.stdout.isTTY ? "FORCE_COLOR" : "NO_COLOR"]: "1",
});
/** @type {(() => Promise<void>) | undefined} */
let stopDatabase;

const interrupted = new AbortController();
for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM", "SIGHUP"])) {
  process.on(signal, () => interrupted.abort(new PlainError("Interrupted.")));
}

try {
  const { total } = await import("./lib/test-results.mjs");
  const { passed, failed } = total(await testAll());
  await cleanUp();
  say(`\nEverything took ${sinceStart()}.\n${passed} passed, ${failed} failed`);
  process.exitCode = failed === 0 ? 0 : 1;
} catch (error) {
  await cleanUp();
  if (interrupted.signal.aborted) say("\nInterrupted.");
  else if (error instanceof PlainError) say(`\n${error.message}`);
  else console.error(error);
  process.exitCode = 1;
}

async function testAll() {
  const { ensureModules } = await import("./lib/modules.mjs");
  const { ensureChromium, ensurePostgres } = await import("./lib/debian.mjs");
  await ensureModules(root, step, interrupted.signal);
  await ensurePostgres(step);
  await ensureChromium(step);
  await startDatabase();

  // Two processors: the compilers share one, the numeric tests have the other.
  const [numerics, checks] = await Promise.all([vitest("numerics"), compile()]);
  const database = await vitest("database");
  const browser = checks.built ? await vitest("browser") : { passed: 0, failed: 1 };
  return [...checks.results, numerics, database, browser];
}

async function startDatabase() {
  const { freePort } = await import("./lib/ports.mjs");
  const { startPostgres } = await import("./lib/postgres.mjs");
  const cluster = await startPostgres({ directory: path.join(home, "postgres"), port: await freePort(), durable: false });
  stopDatabase = cluster.stop;
  process.env.LONGREED_TEST_DATABASE_URL = cluster.urlOf("postgres");
}

/** Types, lint and build; each that fails counts as one failure. */
async function compile() {
  const { ensureBuild } = await import("./lib/build.mjs");
  const bin = (/** @type {string} */ name) => path.join("node_modules", name);
  const results = [
    await check("Route types", [bin("next/dist/bin/next"), "typegen"]),
    await check("Type check", [bin("typescript/bin/tsc"), "--noEmit", "-p", "tests"]),
    await check("Lint", [bin("eslint/bin/eslint.js"), ".", "--max-warnings", "0"]),
  ];
  try {
    await ensureBuild({ root, distDir, step: quietly, signal: interrupted.signal });
    return { built: true, results };
  } catch (error) {
    interrupted.signal.throwIfAborted();
    if (!(error instanceof PlainError)) throw error;
    say(error.message);
    return { built: false, results: [...results, { passed: 0, failed: 1 }] };
  }
}

/** @param {string} title @param {string[]} args */
async function check(title, args) {
  const { code, output } = await quietly(title, () => run(process.execPath, args, { signal: interrupted.signal }));
  if (code !== 0) say(`${title} failed:\n${output.trim()}\n`);
  return { passed: 0, failed: code === 0 ? 0 : 1 };
}

/** @param {string} project */
async function vitest(project) {
  const { resultOf } = await import("./lib/test-results.mjs");
  const report = path.join(home, `${project}.json`);
  const reporters = ["--reporter=default", "--reporter=json", `--outputFile.json=${report}`];
  const args = [path.join("node_modules", "vitest/vitest.mjs"), "run", "--project", project, ...reporters];
  const { code, output } = await quietly(`Tests: ${project}`, () =>
    run(process.execPath, args, { signal: interrupted.signal, detached: true }),
  );
  say(output.trim());
  return resultOf(report, code);
}

/** Like `step`, for what runs side by side: one line when it is over. @type {import("./lib/console.mjs").Step} */
async function quietly(title, work) {
  interrupted.signal.throwIfAborted();
  const begun = Date.now();
  say(`${title} …`);
  const result = await work();
  say(`${title}: ${((Date.now() - begun) / 1000).toFixed(1)} s`);
  return result;
}

/** Leaves nothing running and nothing behind, however the run ended. */
async function cleanUp() {
  const { endProcess, markedProcesses } = await import("./lib/processes.mjs");
  await stopDatabase?.();
  await Promise.all(markedProcesses("LONGREED_TEST_RUN", home).map((mark) => endProcess(mark, 5000)));
  fs.rmSync(home, { recursive: true, force: true });
}
