import { audit } from "@/lib/audit/record";
import { lockedFor } from "@/lib/campaigns/locked-for";
import { queuePriorities, type InLine } from "@/lib/campaigns/queue-priorities";
import { change, inTransaction, rows } from "@/lib/db";
import { conflict, impossible } from "@/lib/errors";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";

type Move = { by: Actor; now: Date; campaignId: string; /** The queued campaign that it is to stand before; null: at the end. */ before: string | null };

/**
 * Gives a queued campaign another place in its rig's line. The places follow from priorities, so these change: the moved one's where
 * that is enough, else also others', each with an audit event of its own. What runs is never passed. A move to where it stands changes nothing.
 */
export async function moveInQueue({ by, now, campaignId, before }: Move): Promise<{ id: string; line: string[] }> {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "edit campaigns", campaignId, now });
    if (campaign.state !== "queued") throw conflict(`${campaign.name} is ${campaign.state}; only a queued campaign has a place in line`);
    const line = await rows<InLine & { name: string }>(
      `select id, name, priority, queued_at as "queuedAt" from campaign where rig_id = $1 and state = 'queued'
        order by priority desc, queued_at, id for no key update`,
      [campaign.rigId],
      transaction,
    );
    const wanted = moved(line, campaignId, before);
    if (!wanted) throw impossible(`There is no such queued campaign on ${campaign.rigName}`, { errors: [{ path: "before", message: `is not queued on ${campaign.rigName}` }] });

    const ids = wanted.map(({ id }) => id);
    if (ids.join() === line.map(({ id }) => id).join()) return { id: campaignId, line: ids };
    const priorities = queuePriorities(wanted, campaignId);
    if (!priorities) throw conflict("The line is too long to be sorted by priority; take something out of it first");

    for (const { id, priority } of line) {
      const wantedPriority = priorities.get(id);
      if (wantedPriority === undefined) continue;
      await change("update campaign set priority = $2 where id = $1", [id, wantedPriority], transaction);
      if (id !== campaignId) await audit(transaction, { by, now, action: "update", entity: "campaign", entityId: id, detail: { priority: { from: priority, to: wantedPriority }, madeWayFor: campaignId } });
      await notify(`changed:campaign:${id}`, transaction);
    }
    const own = line.find(({ id }) => id === campaignId)?.priority;
    await audit(transaction, { by, now, action: "move in line", entity: "campaign", entityId: campaignId, detail: { before, line: ids, priority: { from: own, to: priorities.get(campaignId) ?? own } } });
    await change("update campaign set needs_advance = true where id = $1", [ids[0]], transaction);
    await notify(`campaign:${ids[0]}`, transaction);
    return { id: campaignId, line: ids };
  });
}

/** The line with one campaign taken out and put back before another; undefined when that one is not in it. */
function moved<Item extends InLine>(line: readonly Item[], campaignId: string, before: string | null): Item[] | undefined {
  const own = line.find(({ id }) => id === campaignId);
  const others = line.filter(({ id }) => id !== campaignId);
  const place = before === campaignId ? line.findIndex(({ id }) => id === campaignId) : before === null ? others.length : others.findIndex(({ id }) => id === before);
  return own && place >= 0 ? others.toSpliced(place, 0, own) : undefined;
}
