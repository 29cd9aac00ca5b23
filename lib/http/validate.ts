import { z } from "zod";
import { invalid, notFound, type FieldError } from "@/lib/errors";
import { refuseBadText } from "@/lib/http/read-body";

const MAX_ERRORS = 50;

/** @throws AppError 400 with every bad field, `prefix` in front of its path. */
export function validate<T>(schema: z.ZodType<T>, value: unknown): T {
  let result: z.ZodSafeParseResult<T>;
  try {
    result = schema.safeParse(value);
  } catch (error) {
    if (error instanceof RangeError) throw invalid([{ path: "", message: "is nested too deeply" }]);
    throw error;
  }
  if (result.success) return result.data;
  throw invalid(fieldErrors(result.error));
}

/** Ids are opaque: a malformed one names nothing, so it is 404 like any other that does not exist. */
export function validateParams<P>(schema: z.ZodType<P>, value: unknown): P {
  const result = schema.safeParse(value);
  if (!result.success) throw notFound("address; an id in it is not one of ours");
  return result.data;
}

export function validateQuery<Q>(schema: z.ZodType<Q>, search: URLSearchParams): Q {
  const query: Record<string, string | string[]> = {};
  for (const key of new Set(search.keys())) {
    const values = search.getAll(key);
    query[key] = values.length === 1 ? values[0] : values;
  }
  refuseBadText(query);
  return validate(schema, query);
}

export function fieldErrors(error: z.ZodError): FieldError[] {
  return error.issues.slice(0, MAX_ERRORS).flatMap((issue): FieldError[] => {
    const path = issue.path.map(String).join(".");
    if (issue.code !== "unrecognized_keys") return [{ path, message: issue.message }];
    return issue.keys.map((key) => ({ path: path ? `${path}.${key}` : key, message: "is not a known field" }));
  });
}
