import { z } from "zod";
import { audit } from "@/lib/audit/record";
import { constraintOf } from "@/lib/conflicts";
import { change, inTransaction, row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { conflict, impossible, notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import type { BlockedTimeAnswer } from "@/lib/rigs/schema";
import { time } from "@/lib/schema";
import { Rig } from "@/models/rig";

type NewBlock = { by: Actor; now: Date; rigId: string; from: Date; to: Date; why: string };

/** Keeps a rig free for service from one time to another. Two such times may not overlap. */
export async function blockTime({ by, now, rigId, from, to, why }: NewBlock): Promise<{ id: string }> {
  demand(by, "edit rigs");
  if (from >= to) throw impossible("The time must end after it begins", { errors: [{ path: "to", message: "is not after the beginning" }] });
  return inTransaction(async (transaction) => {
    if (!(await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.SHARE }))) throw notFound("rig");
    try {
      const made = await row<{ id: string }>(
        `insert into maintenance_window (rig_id, period, why, created_by, created_at) values ($1, tstzrange($2, $3, '[)'), $4, $5, $6) returning id`,
        [rigId, from, to, why, by.id, now],
        transaction,
      );
      if (!made) throw new Error("a maintenance window was neither made nor refused");
      await audit(transaction, { by, now, action: "block time", entity: "rig", entityId: rigId, detail: { from, to, why } });
      await notify("changed:rigs", transaction);
      return made;
    } catch (error) {
      if (constraintOf(error) === "maintenance_window_rig_id_period_excl") throw conflict("That time overlaps with one already blocked");
      throw error;
    }
  });
}

/** Withdraws a blocked time; it stays in the record. */
export async function unblockTime({ by, now, windowId }: { by: Actor; now: Date; windowId: string }): Promise<{ id: string }> {
  demand(by, "edit rigs");
  return inTransaction(async (transaction) => {
    const changed = await change("update maintenance_window set withdrawn_at = $2 where id = $1 and withdrawn_at is null", [windowId, now], transaction);
    if (changed === 0) throw notFound("blocked time");
    await audit(transaction, { by, now, action: "unblock time", entity: "maintenanceWindow", entityId: windowId });
    await notify("changed:rigs", transaction);
    return { id: windowId };
  });
}

type BlockQuery = { rigId: string; now: Date; limit: number; cursor?: string };
type BlockRow = { id: string; from: Date; to: Date; why: string; createdBy: string };

/** Blocked times of a rig that have not passed by its own clock, soonest first. @throws AppError 404 when there is no such rig. */
export async function findBlockedTimes({ rigId, now, limit, cursor }: BlockQuery): Promise<Page<BlockedTimeAnswer>> {
  const [from, id] = readCursor(cursor, z.tuple([time, idSchema])) ?? [null, null];
  const found = await rows<BlockRow>(
    `select w.id, lower(w.period) as "from", upper(w.period) as "to", w.why, p.name as "createdBy"
       from maintenance_window w join person p on p.id = w.created_by join rig on rig.id = w.rig_id
      where w.rig_id = $1 and w.withdrawn_at is null
        and upper(w.period) > case when rig.clock = 'simulated' then coalesce(rig.reported_clock, '-infinity') else $2 end
        and ($3::timestamptz is null or (lower(w.period), w.id) > ($3, $4::bigint))
      order by lower(w.period), w.id limit $5`,
    [rigId, now, from, id, limit + 1],
  );
  if (found.length === 0) await demandExists("rig", rigId);
  const { items, nextCursor } = cutPage(found, limit, (window) => [window.from.toISOString(), window.id]);
  return { items: items.map((window) => ({ ...window, from: window.from.toISOString(), to: window.to.toISOString() })), nextCursor };
}
