import { createHash } from "node:crypto";
import fs from "node:fs";
import path from "node:path";
import { PlainError, run } from "./run.mjs";

/** What no page is made of. */
const outside = new Set(
  "node_modules data coverage tests scripts docs migrations rig-simulator next-env.d.ts eslint.config.mjs vitest.config.mts".split(" "),
);

/**
 * Builds the web application into `distDir` (relative to `root`) unless what is there was built from the same sources.
 *
 * @param {{ root: string, distDir: string, step: import("./console.mjs").Step, signal?: AbortSignal }} options
 */
export async function ensureBuild({ root, distDir, step, signal }) {
  const stamp = path.join(root, distDir, "longreed-sources");
  const sources = hashSources(root);
  if (fs.existsSync(stamp) && fs.readFileSync(stamp, "utf8") === sources) return;

  fs.rmSync(stamp, { force: true });
  await step("Building the web application (about half a minute)", async () => {
    const { code, output } = await run(process.execPath, [path.join(root, "node_modules/next/dist/bin/next"), "build"], {
      cwd: root,
      env: { ...process.env, NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1", LONGREED_DIST_DIR: distDir },
      signal,
    });
    if (code !== 0) throw new PlainError(`The build failed:\n${output.trim().split("\n").slice(-40).join("\n")}`);
  });
  fs.writeFileSync(stamp, sources);
}

/**
 * One number for the contents of all files a build is made of.
 *
 * @param {string} root
 * @returns {string}
 */
export function hashSources(root) {
  const hash = createHash("sha256");
  for (const file of sourceFiles(root, "")) {
    hash.update(`${file}\0`).update(createHash("sha256").update(fs.readFileSync(path.join(root, file))).digest());
  }
  return hash.digest("hex");
}

/** @param {string} root @param {string} folder @returns {string[]} */
function sourceFiles(root, folder) {
  return fs
    .readdirSync(path.join(root, folder), { withFileTypes: true })
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .flatMap((entry) => {
      const file = path.join(folder, entry.name);
      const skipped = entry.name.startsWith(".") || /\.(md|tsbuildinfo)$/.test(entry.name) || outside.has(file);
      if (skipped) return [];
      return entry.isDirectory() ? sourceFiles(root, file) : entry.isFile() ? [file] : [];
    });
}
