import type { z } from "zod";
import { Answer } from "@/lib/http/respond";

/**
 * Holds the documented answer against the one that goes out, everywhere but in production: a difference is a fault of
 * ours, found by the first test or page that makes the call. The answer itself passes unchanged.
 */
export function checkAnswer<R>(schema: z.ZodType | undefined, result: R): R {
  if (!schema || process.env.NODE_ENV === "production" || result === undefined || result instanceof Response) return result;
  const checked = schema.safeParse(result instanceof Answer ? result.data : result);
  if (!checked.success) throw new Error(`The answer is not what its schema says:\n${checked.error.message}`);
  return result;
}
