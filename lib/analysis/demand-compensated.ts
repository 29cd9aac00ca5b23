import type { CompensationAnswer } from "@/lib/analysis/schema";
import { impossible } from "@/lib/errors";

/** Refuses, with the reason, an answer that was to be compensated and could not be. @throws AppError 422. */
export function demandCompensated<Answer extends { compensation?: CompensationAnswer | null }>(answer: Answer): Answer {
  const { compensation } = answer;
  if (compensation && !compensation.applied) throw impossible(`${compensation.used}.`, { errors: [{ path: "compensate", message: "only none" }] });
  return answer;
}
