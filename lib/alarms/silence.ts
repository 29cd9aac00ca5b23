import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import { openHold } from "@/lib/campaigns/open-hold";
import { inTransaction, row, rows } from "@/lib/db";
import type { Limit } from "@/lib/protocol/schema";

/** Where no limit says otherwise, a rig with work to do that was not heard for this long is told to people. */
export const SILENT_AFTER_S = 300;
const KIND = "silence";

type Quiet = { rigId: string; name: string; lastContactAt: Date; campaignId: string; sensorId: string; limits: Limit[] };

/**
 * Watches rigs that have a campaign running. By itself silence opens an alarm; it holds only where a limit of the protocol says so.
 *
 * @param listeningSince Since when Longreed could hear anybody; while it was switched off it was not the rig that was silent.
 */
export async function watchSilence({ now, listeningSince }: { now: Date; listeningSince?: Date }): Promise<void> {
  const quiet = await rows<Quiet>(
    `select rig.id as "rigId", rig.name, rig.last_contact_at as "lastContactAt", c.id as "campaignId", c.sensor_id as "sensorId",
            coalesce(v.definition->'limits', '[]') as limits
       from campaign c join rig on rig.id = c.rig_id join protocol_version v on v.id = c.protocol_version_id
      where c.state = 'running' and rig.last_contact_at < $1`,
    [new Date(now.getTime() - 1000)],
  );
  for (const rig of quiet) {
    const silentSince = Math.max(rig.lastContactAt.getTime(), listeningSince?.getTime() ?? -Infinity);
    const silentS = (now.getTime() - silentSince) / 1000;
    const limits = rig.limits.filter((limit) => limit.kind === "silence");
    if (silentS > Math.min(SILENT_AFTER_S, ...limits.map(({ afterS }) => afterS))) {
      await inTransaction(async (transaction) => {
        if (await isStillSilent(transaction, rig)) await tellSilence(transaction, rig, limits, silentS, now);
      });
    }
  }
}

/** Locks the rig, as every contact does, so that a word from the agent comes wholly before or wholly after. */
async function isStillSilent(transaction: Transaction, { rigId, campaignId, lastContactAt }: Quiet): Promise<boolean> {
  const rig = await row<{ lastContactAt: Date }>(`select last_contact_at as "lastContactAt" from rig where id = $1 for no key update`, [rigId], transaction);
  const campaign = await row(`select id from campaign where id = $1 and state = 'running' for no key update`, [campaignId], transaction);
  return campaign !== undefined && rig?.lastContactAt.getTime() === lastContactAt.getTime();
}

async function tellSilence(transaction: Transaction, rig: Quiet, limits: Extract<Limit, { kind: "silence" }>[], silentS: number, now: Date) {
  const text = `${rig.name}: the rig agent was last heard at ${rig.lastContactAt.toISOString().slice(0, 16).replace("T", " ")} UTC`;
  const common = { now, rigId: rig.rigId, campaignId: rig.campaignId, sensorId: rig.sensorId, kind: KIND, value: silentS, unit: "s", text };
  for (const limit of limits.filter(({ afterS }) => silentS > afterS)) {
    const holds = limit.does.includes("hold");
    const actionText = holds ? "The campaign holds until the agent is heard again." : "The campaign waits and goes on when the agent is heard again.";
    const { opened } = await openAlarm(transaction, {
      ...common,
      source: "limit",
      limitId: limit.id,
      limitValue: limit.afterS,
      actionText,
      mail: limit.does.includes("mail"),
    });
    if (opened && holds) await openHold(transaction, { campaignId: rig.campaignId, reason: "silence", text, by: "longreed", now });
  }
  if (silentS > SILENT_AFTER_S) {
    await openAlarm(transaction, {
      ...common,
      source: "system",
      limitValue: SILENT_AFTER_S,
      actionText: "The campaign waits and goes on when the agent is heard again.",
      mail: limits.every(({ does }) => !does.includes("mail")),
    });
  }
}

/** The agent is heard again: its alarms return. */
export async function silenceIsOver(transaction: Transaction, { rigId, now }: { rigId: string; now: Date }): Promise<void> {
  const text = "The rig agent is heard again";
  await returnAlarm(transaction, { rigId, kind: KIND, now, text });
  const limits = await rows<{ campaignId: string; limitId: string }>(
    `select campaign_id as "campaignId", limit_id as "limitId" from alarm
      where rig_id = $1 and kind = $2 and source = 'limit' and state in ('unacknowledged', 'acknowledged')`,
    [rigId, KIND],
    transaction,
  );
  for (const limit of limits) await returnAlarm(transaction, { ...limit, now, text });
}
