import { readFileSync } from "node:fs";
import path from "node:path";

/** Rows of a CSV in tests/reference/: `#` lines are passed over, the first other line names the columns. */
export function referenceTable(name: string): Record<string, number>[] {
  const number = (cell: string) => (cell === "inf" ? Infinity : Number(cell));
  return referenceText(name).map((row) => Object.fromEntries(Object.entries(row).map(([key, cell]) => [key, number(cell)])));
}

/** The same with the cells as they stand. */
export function referenceText(name: string): Record<string, string>[] {
  const file = path.resolve(import.meta.dirname, "../reference", name);
  const lines = readFileSync(file, "utf8").split("\n").filter((line) => line !== "" && !line.startsWith("#"));
  const columns = lines[0].split(",");
  return lines.slice(1).map((line) => Object.fromEntries(line.split(",").map((cell, i) => [columns[i], cell])));
}
