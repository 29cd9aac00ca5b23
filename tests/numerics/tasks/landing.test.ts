import { expect, test } from "vitest";
import { landingOf } from "@/app/(auth)/landing";
import { ROLES } from "@/lib/permissions";

test("only an operator on a phone lands on the tasks", () => {
  expect(landingOf("operator", true)).toBe("/tasks");
  expect(landingOf("operator", false)).toBe("/");
  for (const role of ROLES.filter((role) => role !== "operator")) expect(landingOf(role, true)).toBe("/");
});
