import fs from "node:fs";
import { isRoot } from "./account.mjs";
import { findPostgres } from "./postgres.mjs";
import { PlainError, run } from "./run.mjs";

/** @typedef {import("./console.mjs").Step} Step */

/** @returns {string | undefined} */
export function findChromium() {
  const places = ["/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"];
  return [process.env.LONGREED_CHROMIUM, ...places].find((place) => place && fs.existsSync(place));
}

/** @param {Step} step */
export async function ensurePostgres(step) {
  if (!findPostgres()) await step("Installing Debian's PostgreSQL 15", () => install("PostgreSQL 15", ["postgresql-15"]));
}

/** Chromium, and a font for it: without one, pages have no text. @param {Step} step */
export async function ensureChromium(step) {
  if (findChromium() && fs.existsSync("/usr/share/fonts/truetype/dejavu/DejaVuSans.ttf")) return;
  await step("Installing Debian's Chromium", () => install("Chromium", ["chromium", "fonts-dejavu-core"]));
}

/** @param {string} what @param {readonly string[]} packages */
async function install(what, packages) {
  const command = `apt-get install -y --no-install-recommends ${packages.join(" ")}`;
  if (!isRoot() || !fs.existsSync("/usr/bin/apt-get")) {
    throw new PlainError(`${what} is missing. As root, install it with: ${command}`);
  }
  // A service of the package's own is of no use here, and a container could not start it.
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive", RUNLEVEL: "1" };
  const [file = "", ...args] = command.split(" ");
  const first = await run(file, args, { env });
  if (first.code === 0) return;
  await run("apt-get", ["update"], { env });
  const { code, output } = await run(file, args, { env });
  if (code !== 0) throw new PlainError(`${what} could not be installed (${command}):\n${tail(output)}`);
}

/** @param {string} output */
function tail(output) {
  return output.trim().split("\n").slice(-12).join("\n");
}
