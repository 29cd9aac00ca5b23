import path from "node:path";
import { fileURLToPath } from "node:url";
import { notice, say, sinceStart, step } from "./lib/console.mjs";
import { PlainError } from "./lib/run.mjs";

const root = path.dirname(path.dirname(fileURLToPath(import.meta.url)));
process.chdir(root);

/** What to undo when the laboratory stops. @type {{ name: string, undo: () => Promise<void> | void }[]} */
const undoing = [];
const stopped = new AbortController();
/** @type {Promise<void> | undefined} */
let ending;

for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM", "SIGHUP"])) {
  process.on(signal, () => {
    if (!ending) say("\nStopping …");
    void end(0);
  });
}

const starting = start();
try {
  await starting;
} catch (error) {
  if (!stopped.signal.aborted) {
    say("");
    if (error instanceof PlainError) say(error.message);
    else console.error(error);
    await end(1);
  }
}

async function start() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major < 20 || (major === 20 && minor < 12)) {
    throw new PlainError(`Longreed needs Node 20.12 or later; this is ${process.versions.node}.`);
  }
  await import("./lib/env-file.mjs");
  const { openDataDirectory } = await import("./lib/data-directory.mjs");
  const { claim, RunLock } = await import("./lib/run-lock.mjs");

  const data = openDataDirectory(root, process.env.LONGREED_DATA_DIR);
  const lock = await claim(data.directory);
  if (!(lock instanceof RunLock)) {
    const { pid, address } = lock.heldBy;
    say(address ? `Longreed is running already: ${address} (process ${pid}).` : `Longreed is starting already (process ${pid}).`);
    return;
  }
  undoing.push({ name: "lock", undo: () => lock.release() });

  const { demoEnvironment } = await import("./lib/demo-environment.mjs");
  const { ensureModules } = await import("./lib/modules.mjs");
  const { ensureBuild } = await import("./lib/build.mjs");
  const services = await import("./lib/services.mjs");
  const { supervise } = await import("./lib/supervise.mjs");

  say("Longreed, the demo laboratory on this machine");
  const ports = await data.choosePorts(process.env);
  if (ports.note) say(ports.note);
  await ensureModules(root, proceed, stopped.signal);
  const database = await startDatabase(data, ports);
  const { authSecret } = data.secrets();
  const env = demoEnvironment({ given: process.env, dataDirectory: data.directory, ports, databaseUrl: database, authSecret });
  await runTool("Migrating the database", ["scripts/migrate.ts"], env);
  await ensureBuild({ root, distDir: ".next", step: proceed, signal: stopped.signal });

  const supervisor = {
    root,
    logDirectory: data.logDirectory,
    notice,
    onStart: (/** @type {string} */ name, /** @type {number} */ pid) => lock.remember(name, pid),
  };
  /** @param {import("./lib/supervise.mjs").Service} service */
  const run = (service) => {
    stopped.signal.throwIfAborted();
    undoing.push({ name: service.name, undo: supervise(service, supervisor).stop });
  };

  const inbox = process.env.SMTP_URL ? undefined : `http://127.0.0.1:${ports.inbox}/index.html`;
  if (inbox) run(services.mailService({ root, env, smtpPort: ports.smtp, webPort: ports.inbox, directory: data.mailDirectory }));
  run(services.webService({ root, env, port: ports.web, distDir: ".next" }));
  run(services.workerService({ root, env }));
  await proceed("Waiting for the sign-in page", () =>
    services.waitForAnswer(`http://127.0.0.1:${ports.web}/sign-in`, { withinMs: 120_000, signal: stopped.signal }),
  );
  lock.publish(env.APP_URL ?? "");
  greet(env, inbox);
  run(services.simulatorService({ root, env }));
  await seed(env, data.logDirectory, supervisor.onStart);
}

/**
 * The address of the database: the given one, or that of our own cluster in the data folder.
 *
 * @param {import("./lib/data-directory.mjs").DataDirectory} data
 * @param {import("./lib/data-directory.mjs").Ports} ports
 */
async function startDatabase(data, ports) {
  if (process.env.DATABASE_URL) return process.env.DATABASE_URL;
  const { ensurePostgres } = await import("./lib/debian.mjs");
  const { ensureDatabase, startPostgres } = await import("./lib/postgres.mjs");
  const { watchPostgres } = await import("./lib/watch-postgres.mjs");
  await ensurePostgres(proceed);
  return proceed("Starting PostgreSQL", async () => {
    const password = data.secrets().databasePassword;
    const cluster = await startPostgres({ directory: data.clusterDirectory, port: ports.postgres, password });
    undoing.push({ name: "PostgreSQL", undo: watchPostgres(cluster, notice).stop });
    data.keepPorts({ ...ports, postgres: cluster.port });
    await ensureDatabase(cluster, "longreed");
    return cluster.urlOf("longreed");
  });
}

/**
 * Fills the demo laboratory while people can sign in already. What is there is left as it is.
 *
 * @param {NodeJS.ProcessEnv} env
 * @param {string} logDirectory
 * @param {(name: string, pid: number) => void} onStart
 */
async function seed(env, logDirectory, onStart) {
  const { run } = await import("./lib/run.mjs");
  const { openLog } = await import("./lib/log.mjs");
  const log = openLog(logDirectory, "seed");
  const { code } = await run(process.execPath, ["--import", "tsx", "scripts/seed.ts"], {
    cwd: root,
    env,
    detached: true,
    signal: stopped.signal,
    onStart: (pid) => onStart("seed", pid),
    onLine: (line) => {
      log.line(line);
      notice(line);
    },
  });
  log.close();
  if (code !== 0) notice(`The demo laboratory is not complete (see ${log.file}); the next start goes on with it.`);
}

/** @param {NodeJS.ProcessEnv} env @param {string | undefined} inbox */
function greet(env, inbox) {
  const password = env.LONGREED_DEMO_PASSWORD ?? "";
  const accounts = ["administrator", "researcher", "operator", "viewer"].map((name) => `${name}@longreed.example`);
  say(`
  Longreed         ${env.APP_URL}
  Sign in as       ${accounts.join("\n                   ")}
  with password    ${password}
  Mail inbox       ${inbox ?? "none: SMTP_URL is set"}

Demo mode: known accounts, for this machine only. Ready after ${sinceStart()}; Ctrl-C stops everything.
`);
}

/** @param {string} title @param {string[]} args @param {NodeJS.ProcessEnv} env */
async function runTool(title, args, env) {
  const { run } = await import("./lib/run.mjs");
  await proceed(title, async () => {
    const { code, output } = await run(process.execPath, ["--import", "tsx", ...args], { cwd: root, env, signal: stopped.signal });
    if (code !== 0) throw new PlainError(`${title} failed:\n${output.trim()}`);
  });
}

/** @type {import("./lib/console.mjs").Step} */
async function proceed(title, work) {
  stopped.signal.throwIfAborted();
  const result = await step(title, work);
  stopped.signal.throwIfAborted();
  return result;
}

/** Stops what was started, once: the services together, then PostgreSQL, then the claim. @param {number} code @returns {Promise<void>} */
function end(code) {
  return (ending ??= (async () => {
    stopped.abort();
    await starting.catch(() => undefined);
    const last = undoing.filter(({ name }) => name === "lock" || name === "PostgreSQL");
    await Promise.allSettled(undoing.filter((part) => !last.includes(part)).map(({ undo }) => undo()));
    for (const { undo } of last.reverse()) await undo();
    if (code === 0) say("Stopped.");
    process.exit(code);
  })());
}
