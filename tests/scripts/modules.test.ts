import { expect, test } from "vitest";
import { modulesAreStale } from "@/scripts/lib/modules.mjs";

const needed = { "node_modules/left": { version: "1.0.0" }, "node_modules/left/node_modules/deep": { version: "2.0.0" } };
const foreign = { version: "3.0.0", optional: true };
const wanted = { packages: { "": { version: "0.1.0" }, ...needed, "node_modules/for-another-machine": foreign } };

test("modules that match the lock file are fresh, with or without optional ones", () => {
  expect(modulesAreStale(wanted, { packages: needed })).toBe(false);
  expect(modulesAreStale(wanted, { packages: { ...needed, "node_modules/for-another-machine": foreign } })).toBe(false);
});

test("no modules, or an installation that was cut short, are stale", () => {
  expect(modulesAreStale(wanted, undefined)).toBe(true);
  expect(modulesAreStale(wanted, {})).toBe(true);
});

test("another version, a missing or a left-over package is stale, at any depth", () => {
  const deep = "node_modules/left/node_modules/deep";
  expect(modulesAreStale(wanted, { packages: { ...needed, [deep]: { version: "2.0.1" } } })).toBe(true);
  expect(modulesAreStale(wanted, { packages: { "node_modules/left": { version: "1.0.0" } } })).toBe(true);
  expect(modulesAreStale(wanted, { packages: { ...needed, "node_modules/gone": { version: "1.0.0" } } })).toBe(true);
  const other = { ...foreign, version: "3.0.1" };
  expect(modulesAreStale(wanted, { packages: { ...needed, "node_modules/for-another-machine": other } })).toBe(true);
});

test("a project without a lock file is refused", () => {
  expect(() => modulesAreStale(undefined, wanted)).toThrow("package-lock.json is missing");
});
