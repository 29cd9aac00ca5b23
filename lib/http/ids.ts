import { z } from "zod";

const LARGEST = "9223372036854775807";

/** An id as our addresses and answers carry it: opaque to callers, a whole number of PostgreSQL's bigint to us. */
export const idSchema = z
  .string()
  .regex(/^[1-9]\d{0,18}$/, "is not an id")
  .refine((id) => id.length < LARGEST.length || id <= LARGEST, "is not an id")
  .meta({ title: "id" });

/** For addresses with one `[id]`. */
export const idParams = z.object({ id: idSchema });
