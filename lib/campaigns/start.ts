import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { lockCampaign, type CampaignRow } from "@/lib/campaigns/campaign-row";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, inTransaction, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { start } from "@/lib/protocol/interpreter";
import { FIT_CODE_VERSION } from "@/lib/readings/fit-code-version";

/**
 * Whether a rig has no campaign on it and is not blocked, and which queued one would be next: highest priority, then longest in line, of those
 * whose time has come. A simulated rig that has not told its clock has no time yet.
 */
const NEXT_IN_LINE = `
  select c.id from campaign c join rig on rig.id = c.rig_id
   where c.rig_id = $1 and c.state = 'queued' and rig.retired_at is null and rig.abilities is not null
     and (rig.clock = 'real' or rig.reported_clock is not null)
     and (c.start_at is null or c.start_at <= case when rig.clock = 'real' then $2::timestamptz else rig.reported_clock end)
     and not exists (select 1 from maintenance_window w where w.rig_id = c.rig_id and w.withdrawn_at is null
                      and w.period @> case when rig.clock = 'real' then $2::timestamptz else rig.reported_clock end)
     and not exists (select 1 from campaign other where other.rig_id = c.rig_id and other.origin = 'protocol' and not other.set_aside
                      and (other.state in ('running', 'held') or other.parking in ('wanted', 'running')))
   order by c.priority desc, c.queued_at, c.id
   limit 1`;

/** Starts the next queued campaign of a rig when the rig is free. */
export async function startNextOnRig({ rigId, now }: { rigId: string; now: Date }): Promise<void> {
  await inTransaction(async (transaction) => {
    await row(`select id from rig where id = $1 for no key update`, [rigId], transaction);
    const chosen = await row<{ id: string }>(NEXT_IN_LINE, [rigId, now], transaction);
    const campaign = chosen && (await lockCampaign(transaction, { campaignId: chosen.id, now }));
    if (campaign?.state === "queued") await begin(transaction, campaign, now);
  });
}

/** Starts a queued campaign if it is the next in line of a free rig. */
export async function startQueued(transaction: Transaction, { campaign, now }: { campaign: CampaignRow; now: Date }): Promise<void> {
  const chosen = await row<{ id: string }>(NEXT_IN_LINE, [campaign.rigId, now], transaction);
  if (chosen?.id === campaign.id) await begin(transaction, campaign, now);
  else if (chosen) {
    await change(`update campaign set needs_advance = true where id = $1`, [chosen.id], transaction);
    await notify(`campaign:${chosen.id}`, transaction);
  }
}

async function begin(transaction: Transaction, campaign: CampaignRow, now: Date): Promise<void> {
  const counted = await row<{ number: number }>(
    `update rig set campaigns_started = campaigns_started + 1 where id = $1 returning campaigns_started as number`,
    [campaign.rigId],
    transaction,
  );
  const cursor = start(campaign.definition);
  await change(
    `update campaign set state = 'running', started_at = $2, started_clock = $3, rig_number = $4, cursor = $5, needs_advance = true where id = $1`,
    [campaign.id, now, campaign.clock, counted?.number, JSON.stringify(cursor)],
    transaction,
  );
  await change(
    `insert into fit_run (campaign_id, settings, code_version, current, created_at) values ($1, $2, $3, true, $4)`,
    [campaign.id, JSON.stringify({ offsetSlope: true }), FIT_CODE_VERSION, now],
    transaction,
  );
  await recordEvent(transaction, { campaignId: campaign.id, now, kind: "start", who: "Longreed", text: `Started on ${campaign.rigName}` });
  await audit(transaction, { by: "longreed", now, action: "start", entity: "campaign", entityId: campaign.id });
  await notify(`campaign:${campaign.id}`, transaction);
  await notify(`changed:campaign:${campaign.id}`, transaction);
}
