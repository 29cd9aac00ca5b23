import fs from "node:fs";
import path from "node:path";
import { freePort, isFree, portFrom } from "./ports.mjs";
import { PlainError } from "./run.mjs";
import { demoSecrets } from "./secrets.mjs";

const usualPorts = { web: 3000, postgres: 5433, smtp: 1025, inbox: 1080 };

/** @typedef {typeof usualPorts} Ports */
/** @typedef {ReturnType<typeof openDataDirectory>} DataDirectory */

/**
 * The folder that holds all that a demo on this machine keeps. Others may pass through it, as PostgreSQL's account
 * must; what is in it is private by itself.
 *
 * @param {string} root
 * @param {string} [given]
 */
export function openDataDirectory(root, given) {
  const directory = path.resolve(root, given || "data");
  const mailDirectory = path.join(directory, "mail");
  fs.mkdirSync(directory, { recursive: true });
  const own = process.getuid?.();
  if (own !== 0 && fs.statSync(directory).uid !== own) {
    throw new PlainError(`${directory} belongs to another account: start as that account, or as root.`);
  }
  fs.mkdirSync(mailDirectory, { recursive: true, mode: 0o700 });
  const portsFile = path.join(directory, "ports.json");

  return {
    directory,
    mailDirectory,
    clusterDirectory: path.join(directory, "postgres"),
    logDirectory: path.join(directory, "logs"),
    secrets: () => demoSecrets(directory),
    /** @param {Ports} ports */
    keepPorts({ web, postgres, smtp, inbox }) {
      fs.writeFileSync(portsFile, `${JSON.stringify({ web, postgres, smtp, inbox }, null, 2)}\n`);
    },
    /** @param {Record<string, string | undefined>} env */
    choosePorts(env) {
      const kept = fs.existsSync(portsFile) ? JSON.parse(fs.readFileSync(portsFile, "utf8")) : {};
      return choosePorts(env, { ...usualPorts, ...kept });
    },
  };
}

/**
 * Free ports, those of last time where possible. A port that was asked for is taken or refused, never replaced.
 *
 * @param {Record<string, string | undefined>} env
 * @param {Ports} kept
 * @param {(port: number) => Promise<boolean>} [free]
 * @returns {Promise<Ports & { note?: string }>}
 */
export async function choosePorts(env, kept, free = isFree) {
  /** @type {Set<number>} */
  const taken = new Set();
  /** @param {number} preferred */
  const choose = async (preferred) => {
    const port = (await portFrom(preferred, { taken, free })) ?? (await freePort());
    taken.add(port);
    return port;
  };
  const asked = askedPort("PORT", env.PORT);
  if (asked !== undefined && !(await free(asked))) {
    throw new PlainError(`Port ${asked} is taken by another program: set PORT to a free one, or leave it out.`);
  }
  const web = await choose(asked ?? usualPorts.web);
  return {
    web,
    postgres: await choose(askedPort("LONGREED_POSTGRES_PORT", env.LONGREED_POSTGRES_PORT) ?? kept.postgres),
    smtp: await choose(kept.smtp),
    inbox: await choose(kept.inbox),
    note: asked === undefined && web !== usualPorts.web ? `Port ${usualPorts.web} is taken; using ${web}.` : undefined,
  };
}

/** @param {string} variable @param {string | undefined} value */
function askedPort(variable, value) {
  if (!value) return undefined;
  const port = Number(value);
  if (Number.isInteger(port) && port >= 1 && port <= 65_535) return port;
  throw new PlainError(`${variable} must be a port number from 1 to 65535, not "${value}".`);
}
