import { row } from "@/lib/db";
import { notFound } from "@/lib/errors";

/**
 * For lists of what belongs to a thing: an empty one may mean that there is no such thing. The kind is also its table.
 *
 * @throws AppError 404
 */
export async function demandExists(kind: "campaign" | "liquid" | "protocol" | "rig" | "sensor", id: string): Promise<void> {
  if (!(await row(`select id from ${kind} where id = $1`, [id]))) throw notFound(kind);
}
