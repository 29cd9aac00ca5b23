import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { clusterAccount, passTo, reachableDirectory } from "./account.mjs";
import { PlainError, run, runSilently } from "./run.mjs";

const role = "app";

/**
 * @typedef {{ directory: string, port: number, password?: string, durable?: boolean }} ClusterOptions
 *   `durable: false` trades safety against a power cut for speed: for tests only.
 * @typedef {object} Cluster
 * @property {number} port
 * @property {(database: string) => string} urlOf
 * @property {() => boolean} isRunning
 * @property {() => Promise<void>} startAgain After the server died.
 * @property {() => Promise<void>} stop
 */

/**
 * The folder of the PostgreSQL server programs, version 15 or later; Debian keeps them out of PATH.
 *
 * @returns {string | undefined}
 */
export function findPostgres() {
  const root = "/usr/lib/postgresql";
  const versions = fs.existsSync(root) ? fs.readdirSync(root).map(Number).filter((version) => version >= 15) : [];
  return versions
    .sort((a, b) => a - b)
    .map((version) => path.join(root, String(version), "bin"))
    .find((bin) => fs.existsSync(path.join(bin, "initdb")) && fs.existsSync(path.join(bin, "pg_ctl")));
}

/**
 * Starts the cluster in `directory`, making it first where there is none, and picks up one that a crash left
 * running or locked. A cluster found running keeps its port. The server's log is `server.log` in its directory.
 *
 * @param {ClusterOptions} options
 * @returns {Promise<Cluster>}
 */
export async function startPostgres({ directory: wished, port, password, durable = true }) {
  const bin = findPostgres();
  if (!bin) throw new PlainError("PostgreSQL 15 is missing. Install it with: apt-get install postgresql-15");

  const directory = await reachableDirectory(wished);
  const account = await clusterAccount(directory);
  /** @param {string} program @param {string[]} args */
  const asServer = (program, args) => [...account.wrapper, path.join(bin, program), ...args];
  const env = { ...process.env, LC_ALL: "C.UTF-8", TZ: "UTC", PGPASSWORD: password };

  if (!fs.existsSync(path.join(directory, "PG_VERSION"))) await initialise();
  const running = runningPort(directory);
  const actualPort = running ?? port;
  if (running === undefined) await start();

  return {
    port: actualPort,
    urlOf: (database) => `postgres://${role}${password ? `:${password}` : ""}@127.0.0.1:${actualPort}/${database}`,
    isRunning: () => runningPort(directory) !== undefined,
    startAgain: start,
    async stop() {
      const [file = "", ...args] = asServer("pg_ctl", ["stop", "-D", directory, "-m", "fast", "-w", "-t", "60"]);
      await runSilently(file, args, { cwd: "/", env });
    },
  };

  async function initialise() {
    const passwordFile = password && path.join(fs.mkdtempSync(path.join(os.tmpdir(), "longreed-")), "password");
    if (passwordFile) {
      fs.writeFileSync(passwordFile, password, { mode: 0o600 });
      passTo(account, path.dirname(passwordFile));
      passTo(account, passwordFile);
    }
    const access = passwordFile ? ["-A", "scram-sha-256", `--pwfile=${passwordFile}`] : ["-A", "trust"];
    const settings = ["-D", directory, "-U", role, "-E", "UTF8", "--locale=C.UTF-8", ...(durable ? [] : ["--no-sync"])];
    const [file = "", ...args] = asServer("initdb", [...settings, ...access]);
    try {
      const { code, output } = await run(file, args, { cwd: "/", env });
      if (code !== 0) throw new PlainError(`PostgreSQL's initdb failed in ${directory}:\n${output.trim()}`);
    } finally {
      if (passwordFile) fs.rmSync(path.dirname(passwordFile), { recursive: true });
    }
  }

  async function start() {
    removeForeignLock(directory);
    const logFile = path.join(directory, "server.log");
    const settings = [`-p ${actualPort}`, "-c listen_addresses=127.0.0.1", "-c unix_socket_directories=''", "-c timezone=UTC"];
    if (!durable) settings.push("-c fsync=off", "-c synchronous_commit=off", "-c full_page_writes=off");
    const options = ["-D", directory, "-l", logFile, "-w", "-t", "60", "-o", settings.join(" ")];
    const [file = "", ...args] = asServer("pg_ctl", ["start", ...options]);
    const code = await runSilently(file, args, { cwd: "/", env });
    if (code !== 0) throw new PlainError(`PostgreSQL did not start on port ${actualPort}; its last words are in ${logFile}.`);
  }
}

/**
 * Makes the database unless the server has it.
 *
 * @param {Cluster} cluster
 * @param {string} database
 */
export async function ensureDatabase(cluster, database) {
  const bin = findPostgres();
  if (!bin) throw new PlainError("PostgreSQL 15 is missing.");
  const admin = cluster.urlOf("postgres");
  const sql = `SELECT 1 FROM pg_database WHERE datname = '${database}'`;
  const found = await run(path.join(bin, "psql"), ["-XAtc", sql, admin], { cwd: "/" });
  if (found.code === 0 && found.output.trim() === "1") return;
  const made = await run(path.join(bin, "psql"), ["-XAtc", `CREATE DATABASE "${database}"`, admin], { cwd: "/" });
  if (made.code !== 0) throw new PlainError(`PostgreSQL could not make the database ${database}: ${made.output.trim()}`);
}

/**
 * The port of the server that runs in this directory.
 *
 * @param {string} directory
 * @returns {number | undefined}
 */
function runningPort(directory) {
  const lines = readLock(directory);
  return lines && worksIn(lines[0] ?? "", directory) ? Number(lines[3]) : undefined;
}

/**
 * Removes a lock whose process number was given to another program since a crash: PostgreSQL would take that one for a
 * server and refuse to start. It judges every other stale lock itself, and must, while sessions of a dead server live.
 *
 * @param {string} directory
 */
function removeForeignLock(directory) {
  const pid = readLock(directory)?.[0];
  if (pid === undefined || !fs.existsSync(`/proc/${pid}`)) return;
  if (fs.readdirSync("/proc").some((name) => /^\d+$/.test(name) && worksIn(name, directory))) return;
  fs.rmSync(path.join(directory, "postmaster.pid"));
}

/** @param {string} directory */
function readLock(directory) {
  const lock = path.join(directory, "postmaster.pid");
  return fs.existsSync(lock) ? fs.readFileSync(lock, "utf8").split("\n") : undefined;
}

/** @param {string} pid @param {string} directory */
function worksIn(pid, directory) {
  try {
    return fs.readlinkSync(`/proc/${pid}/cwd`) === fs.realpathSync(directory);
  } catch {
    return false;
  }
}
