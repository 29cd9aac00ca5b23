import type { Operation } from "@/lib/http/operation";
import { PROBLEM_CODES, problemType, type ProblemCode } from "@/lib/problem-types";

/** The problems that a call may answer with: those of every call of its shape, and those that are peculiar to it. */
export function problemCodesOf(call: string, { access, params, query, body, form }: Operation): ProblemCode[] {
  const changes = !call.startsWith("GET ");
  const own = PROBLEM_CODES.filter((code) => problemType(code).calls?.includes(call));
  const general: [ProblemCode, boolean][] = [
    ["invalid", Boolean(query ?? body ?? form)],
    ["not-signed-in", access !== "public"],
    ["not-allowed", access !== "public" && access !== "agent"],
    ["not-found", params !== undefined],
    ["conflict", changes],
    ["too-large", Boolean(body ?? form)],
    ["unsupported-type", Boolean(body ?? form)],
    ["impossible", changes],
    ["in-progress", call.startsWith("POST ") && access !== "public" && access !== "agent"],
    ["key-reused", call.startsWith("POST ") && access !== "public" && access !== "agent"],
    ["unavailable", true],
  ];
  const codes = new Set([...own, ...general.filter(([, holds]) => holds).map(([code]) => code)]);
  return PROBLEM_CODES.filter((code) => codes.has(code));
}
