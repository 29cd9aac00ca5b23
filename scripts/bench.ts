import { spawn } from "node:child_process";
import fs from "node:fs";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { BenchResult } from "./bench/fits";

const folder = path.resolve(import.meta.dirname, "bench");

/** Runs the benchmarks named, or every file in scripts/bench, each in a process of its own, and prints one table. */
async function main(names: string[]): Promise<void> {
  const all = fs.readdirSync(folder).filter((file) => file.endsWith(".ts")).map((file) => path.basename(file, ".ts"));
  const unknown = names.filter((name) => !all.includes(name));
  if (unknown.length > 0) throw new Error(`there is no benchmark ${unknown.join(", ")}; there are ${all.join(", ")}`);

  const results: BenchResult[] = [];
  for (const name of names.length > 0 ? names : all) {
    console.error(`${name} …`);
    results.push(...(await inOwnProcess(name)));
  }
  print(results);
}

/** What a benchmark starts and warms up must not be felt by the next. The results come as the last line of its output. */
function inOwnProcess(name: string): Promise<BenchResult[]> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [...process.execArgv, import.meta.filename, "--run", name], { stdio: ["ignore", "pipe", "inherit"] });
    let output = "";
    child.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
    child.once("error", reject);
    child.once("close", (code) => {
      if (code === 0) resolve(JSON.parse(output.trim().split("\n").at(-1) ?? "[]") as BenchResult[]);
      else reject(new Error(`${name} ended with code ${code}`));
    });
  });
}

async function runHere(name: string): Promise<void> {
  const { run } = (await import(pathToFileURL(path.join(folder, `${name}.ts`)).href)) as { run: () => Promise<BenchResult[]> };
  console.log(JSON.stringify(await run()));
}

function print(results: readonly BenchResult[]): void {
  const rows = results.map(({ name, value, unit, ratio }) => [name, value.toLocaleString("en"), unit, ratio === undefined ? "" : ratio.toFixed(2)]);
  const table = [["what", "value", "unit", "of the yardstick"], ...rows];
  const widths = table[0].map((_, column) => Math.max(...table.map((line) => line[column].length)));
  for (const line of table) console.log(line.map((cell, column) => (column === 1 || column === 3 ? cell.padStart(widths[column]) : cell.padEnd(widths[column]))).join("  ").trimEnd());
}

const [first, ...rest] = process.argv.slice(2);
const done = first === "--run" ? runHere(rest[0]) : main(first === undefined ? [] : [first, ...rest]);
done.then(
  () => process.exit(0),
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  },
);
