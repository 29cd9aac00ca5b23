import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { hashSources } from "@/scripts/lib/build.mjs";

let root: string;

beforeEach(() => {
  root = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-sources-"));
  write("app/page.tsx", "one");
  write("lib/format.ts", "two");
});

afterEach(() => fs.rmSync(root, { recursive: true }));

function write(file: string, text: string) {
  fs.mkdirSync(path.dirname(path.join(root, file)), { recursive: true });
  fs.writeFileSync(path.join(root, file), text);
}

test("the same contents give the same number, whatever their dates", () => {
  const before = hashSources(root);
  fs.utimesSync(path.join(root, "app/page.tsx"), 0, 0);
  expect(hashSources(root)).toBe(before);
});

test.each([
  ["a changed file", () => write("app/page.tsx", "other")],
  ["a new file", () => write("components/ui/button.tsx", "")],
  ["a changed setting", () => write("next.config.mjs", "")],
  ["a removed file", () => fs.rmSync(path.join(root, "lib/format.ts"))],
  ["a moved file", () => fs.renameSync(path.join(root, "lib/format.ts"), path.join(root, "lib/formats.ts"))],
  ["contents that move between files", () => (write("app/page.tsx", "two"), write("lib/format.ts", "one"))],
])("%s asks for a new build", (_what, act) => {
  const before = hashSources(root);
  act();
  expect(hashSources(root)).not.toBe(before);
});

test.each(["tests/numerics/a.test.ts", "data/logs/web.log", ".next/BUILD_ID", "README.md", "node_modules/a/index.js", "next-env.d.ts"])(
  "%s is no part of a page",
  (file) => {
    const before = hashSources(root);
    write(file, "anything");
    expect(hashSources(root)).toBe(before);
  },
);
