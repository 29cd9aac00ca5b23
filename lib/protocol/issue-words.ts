import type { z } from "zod";

/** What the schemas do not say themselves, in plain words: shown at the field that is wrong. */
export function issueWords(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case "invalid_type":
      if (issue.input === undefined) return "This is needed";
      if (issue.expected === "number") return "A number is needed";
      return issue.expected === "int" ? "A whole number is needed" : undefined;
    case "too_small":
      if (issue.origin === "string") return "This is needed";
      if (issue.origin === "array") return "At least one is needed";
      return issue.inclusive === false ? `It has to be above ${issue.minimum}` : `It has to be at least ${issue.minimum}`;
    case "too_big":
      if (issue.origin === "string") return `It has at most ${issue.maximum} characters`;
      if (issue.origin === "array") return `There are at most ${issue.maximum}`;
      return issue.inclusive === false ? `It has to be below ${issue.maximum}` : `It has to be at most ${issue.maximum}`;
    case "invalid_union":
      return "A value of another form is needed";
    case "invalid_value":
      return `One of ${issue.values.map(String).join(", ")} is needed`;
    default:
      return undefined;
  }
}
