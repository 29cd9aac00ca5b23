import type { Transaction } from "sequelize";
import { z } from "zod";
import { row } from "@/lib/db";

const stored = z.object({ name: z.string(), timeZone: z.string() });

export type Laboratory = z.output<typeof stored>;

/** Name and zone as the administrator set them; until then the zone of the first rig. */
export async function readLaboratory(transaction?: Transaction): Promise<Laboratory> {
  const found = await row<{ value: unknown; zone: string | null }>(
    `select (select value from setting where name = 'laboratory') as value,
       (select time_zone from rig where retired_at is null order by id limit 1) as zone`,
    [],
    transaction,
  );
  const set = stored.safeParse(found?.value);
  return set.success ? set.data : { name: "Laboratory", timeZone: found?.zone ?? "UTC" };
}
