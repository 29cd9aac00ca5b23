import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import type { TestProject } from "vitest/node";
import { ensureBuild } from "@/scripts/lib/build.mjs";
import { openDataDirectory } from "@/scripts/lib/data-directory.mjs";
import { findChromium } from "@/scripts/lib/debian.mjs";
import { demoEnvironment } from "@/scripts/lib/demo-environment.mjs";
import { freePort } from "@/scripts/lib/ports.mjs";
import { claim, RunLock } from "@/scripts/lib/run-lock.mjs";
import { mailService, waitForAnswer, webService, workerService } from "@/scripts/lib/services.mjs";
import { type Service, supervise } from "@/scripts/lib/supervise.mjs";
import { migrate } from "@/scripts/migrate";
import { testServer } from "./postgres";
import { createDatabase, dropDatabase, urlOf } from "./server";

/** Addresses and places of the laboratory that the browser tests use. */
export interface Laboratory {
  appUrl: string;
  /** The inbox; its API is at `/api/email`. */
  inboxUrl: string;
  databaseUrl: string;
  /** Logs are in `logs`; `childrenOf` tells the processes' numbers. */
  dataDirectory: string;
  chromium: string;
  /** What a simulator or another tool of ours needs to reach this laboratory. */
  env: Record<string, string>;
}

declare module "vitest" {
  interface ProvidedContext {
    laboratory: Laboratory;
  }
}

const root = path.resolve(import.meta.dirname, "../..");
const distDir = ".next-test";

/** The built application with worker and mail on free ports and a database of its own; a killed part starts again. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const undoing: (() => Promise<void> | void)[] = [];
  const tearDown = async () => {
    for (const undo of undoing.reverse()) await undo();
  };
  try {
    project.provide("laboratory", await startLaboratory((undo) => undoing.push(undo)));
  } catch (error) {
    await tearDown();
    throw error;
  }
  return tearDown;
}

async function startLaboratory(later: (undo: () => Promise<void> | void) => void): Promise<Laboratory> {
  const chromium = findChromium();
  if (!chromium) throw new Error("Chromium is missing; install it with: apt-get install chromium fonts-dejavu-core");
  await ensureBuild({ root, distDir, step: (_title, work) => work() });

  const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-laboratory-"));
  later(() => fs.rmSync(home, { recursive: true, force: true }));
  const server = await testServer();
  later(server.stop);
  const database = `longreed_laboratory_${process.pid}`;
  await createDatabase(server.url, database);
  later(() => dropDatabase(server.url, database));
  const databaseUrl = urlOf(server.url, database);
  await migrate(databaseUrl);

  const data = openDataDirectory(home);
  const ports = { web: await freePort(), smtp: await freePort(), inbox: await freePort() };
  const given = { ...process.env, SMTP_URL: undefined, AUTH_SECRET: undefined, APP_URL: undefined };
  const { authSecret } = data.secrets();
  const env = demoEnvironment({ given, dataDirectory: data.directory, ports, databaseUrl, authSecret });
  const lock = await claim(data.directory);
  if (!(lock instanceof RunLock)) throw new Error("a new folder cannot be in use");
  later(() => lock.release());

  const start = (service: Service) => {
    const notice = (line: string) => console.log(line);
    const onStart = (name: string, pid: number) => lock.remember(name, pid);
    later(supervise(service, { root, logDirectory: data.logDirectory, notice, onStart }).stop);
  };
  start(mailService({ root, env, smtpPort: ports.smtp, webPort: ports.inbox, directory: data.mailDirectory }));
  start(webService({ root, env, port: ports.web, distDir }));
  start(workerService({ root, env }));
  const appUrl = `http://127.0.0.1:${ports.web}`;
  const inboxUrl = `http://127.0.0.1:${ports.inbox}`;
  await waitForAnswer(`${appUrl}/sign-in`, { withinMs: 60_000 });
  await waitForAnswer(`${inboxUrl}/api/healthz`, { withinMs: 60_000 });

  const set = Object.entries(env).filter((entry): entry is [string, string] => entry[1] !== undefined);
  return { appUrl, inboxUrl, databaseUrl, dataDirectory: data.directory, chromium, env: Object.fromEntries(set) };
}
