import fs from "node:fs";
import path from "node:path";
import { expect, test } from "vitest";

const root = path.resolve(import.meta.dirname, "..");
const read = (file: string) => fs.readFileSync(path.join(root, file), "utf8");
const manifest = JSON.parse(read("package.json")) as Record<"dependencies" | "devDependencies", Record<string, string>>;

const folders = ["app", "components", "jobs", "lib", "migrations", "models", "rig-simulator", "scripts", "tests"];
const configuration = fs.readdirSync(root).filter((file) => /\.(mjs|mts|ts)$/.test(file));
const text = [
  ...folders.flatMap((folder) => fs.readdirSync(path.join(root, folder), { recursive: true, encoding: "utf8" }).filter((file) => /\.(tsx?|mts|mjs|css)$/.test(file)).map((file) => `${folder}/${file}`)),
  ...configuration,
]
  .map(read)
  .join("\n");

/** Needed by another package, by the tools themselves, or (axe-core) read by people's own checks of a page, so that nothing of ours names them. */
const NEEDED_BY_OTHERS = ["react-dom", "vite", "typescript", "eslint", "tailwindcss", "pg-hstore", "axe-core"];

/** What is installed is downloaded, audited and kept up to date by everybody: nothing is for no use. */
test.each(Object.keys({ ...manifest.dependencies, ...manifest.devDependencies }).filter((name) => !name.startsWith("@types/") && !NEEDED_BY_OTHERS.includes(name)))(
  "%s is used",
  (name) => {
    const mentioned = new RegExp(`["'\`](?:npm:)?${name.replaceAll(/[/.]/g, "\\$&")}(?:/[^"'\`]*)?["'\`]|node_modules/${name.replaceAll(/[/.]/g, "\\$&")}\\b`);
    const run = new RegExp(`"[^"]*\\b${name}\\b[^"]*"`).test(JSON.stringify((JSON.parse(read("package.json")) as { scripts: Record<string, string> }).scripts));
    expect(mentioned.test(text) || run).toBe(true);
  },
);
