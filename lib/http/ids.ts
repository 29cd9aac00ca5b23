import { z } from "zod";

/** An id as our addresses and answers carry it: opaque to callers, a whole number of PostgreSQL's bigint to us. */
export const idSchema = z
  .string()
  .regex(/^[1-9]\d{0,18}$/, "is not an id")
  .refine((id) => BigInt(id) <= 9_223_372_036_854_775_807n, "is not an id");

/** For addresses with one `[id]`. */
export const idParams = z.object({ id: idSchema });
