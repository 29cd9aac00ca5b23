import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { resultOf, total } from "@/scripts/lib/test-results.mjs";

let file: string;

beforeEach(() => {
  file = path.join(fs.mkdtempSync(path.join(os.tmpdir(), "longreed-results-")), "report.json");
});

afterEach(() => fs.rmSync(path.dirname(file), { recursive: true }));

function report(passed: number, failed: number, files: { status: string; tests: string[] }[]) {
  const testResults = files.map(({ status, tests }) => ({ status, assertionResults: tests.map((status) => ({ status })) }));
  fs.writeFileSync(file, JSON.stringify({ numPassedTests: passed, numFailedTests: failed, testResults }));
}

test("counts tests, and a file that did not load as one failure", () => {
  report(2, 1, [
    { status: "passed", tests: ["passed"] },
    { status: "failed", tests: ["passed", "failed"] },
    { status: "failed", tests: [] },
  ]);
  expect(resultOf(file, 1)).toEqual({ passed: 2, failed: 2 });
});

test("a run without a report, or one that ended badly with all tests passed, has failed", () => {
  expect(resultOf(file, 0)).toEqual({ passed: 0, failed: 1 });
  report(1, 0, [{ status: "passed", tests: ["passed"] }]);
  expect(resultOf(file, 1)).toEqual({ passed: 1, failed: 1 });
  expect(resultOf(file, 0)).toEqual({ passed: 1, failed: 0 });
});

test("sums up all runs", () => {
  expect(total([{ passed: 3, failed: 0 }, { passed: 2, failed: 1 }])).toEqual({ passed: 5, failed: 1 });
  expect(total([])).toEqual({ passed: 0, failed: 0 });
});
