import path from "node:path";
import { PlainError } from "./run.mjs";

/** @typedef {import("./supervise.mjs").Service} Service */
/** @typedef {{ root: string, env: NodeJS.ProcessEnv }} Place */

/** @param {Place & { port: number, distDir: string }} options @returns {Service} */
export function webService({ root, env, port, distDir }) {
  return {
    name: "web",
    args: [path.join(root, "node_modules/next/dist/bin/next"), "start", "-H", "127.0.0.1", "-p", String(port)],
    env: { ...env, NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1", LONGREED_DIST_DIR: distDir },
    graceMs: 5000,
  };
}

/** @param {Place} place @returns {Service} */
export function workerService({ env }) {
  return { name: "worker", args: ["--import", "tsx", "jobs/worker.ts"], env: { ...env, NODE_ENV: "production" } };
}

/** @param {Place} place @returns {Service} */
export function simulatorService({ env }) {
  return { name: "simulator", args: ["--import", "tsx", "rig-simulator/cli.ts", "laboratory"], env };
}

/**
 * Catches all mail on this machine and shows it in a browser.
 *
 * @param {Place & { smtpPort: number, webPort: number, directory: string }} options
 * @returns {Service}
 */
export function mailService({ root, env, smtpPort, webPort, directory }) {
  const bind = ["--ip", "127.0.0.1", "-s", String(smtpPort), "--web-ip", "127.0.0.1", "-w", String(webPort)];
  return {
    name: "maildev",
    args: [path.join(root, "node_modules/maildev/dist/bin/maildev.js"), ...bind, "--mail-directory", directory],
    env,
    graceMs: 3000,
  };
}

/**
 * Waits until a server answers, whatever it answers.
 *
 * @param {string} url
 * @param {{ withinMs: number, signal?: AbortSignal }} options
 */
export async function waitForAnswer(url, { withinMs, signal }) {
  const deadline = Date.now() + withinMs;
  while (Date.now() < deadline) {
    signal?.throwIfAborted();
    try {
      const answer = await fetch(url, { redirect: "manual", signal: AbortSignal.timeout(10_000) });
      await answer.body?.cancel();
      if (answer.status < 500) return;
    } catch {
      // Not listening yet.
    }
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new PlainError(`${url} did not answer within ${withinMs / 1000} s.`);
}
