import { existsSync, readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { z } from "zod";
import { scenarioSchema, type Scenario } from "./scenario";

const folder = path.join(import.meta.dirname, "scenarios");

export const scenarioNames = (): string[] =>
  readdirSync(folder)
    .filter((file) => file.endsWith(".json"))
    .map((file) => file.slice(0, -5))
    .sort();

/** Reads a scenario by the name of one of ours, or from a file. Throws an Error that says what is wrong with it. */
export function loadScenario(nameOrFile: string): Scenario {
  const own = path.join(folder, `${nameOrFile}.json`);
  const file = /^[a-z0-9-]+$/.test(nameOrFile) && existsSync(own) ? own : nameOrFile;
  if (!existsSync(file)) throw new Error(`There is no scenario "${nameOrFile}": give a file, or one of ${scenarioNames().join(", ")}`);
  return parseScenario(readFileSync(file, "utf8"), file);
}

export function parseScenario(text: string, source: string): Scenario {
  let data: unknown;
  try {
    data = JSON.parse(text);
  } catch (error) {
    throw new Error(`${source} is not JSON: ${(error as Error).message}`);
  }
  const result = scenarioSchema.safeParse(data);
  if (!result.success) throw new Error(`${source} is not a scenario:\n${z.prettifyError(result.error)}`);
  return result.data;
}
