import type { Transaction } from "sequelize";
import { lockCampaign, readLocked, type CampaignRow } from "@/lib/campaigns/campaign-row";
import { closeStep, openAndLast, skipStep } from "@/lib/campaigns/steps-of-campaign";
import { checkMount } from "@/lib/campaigns/check-mount";
import { gatherFacts } from "@/lib/campaigns/facts";
import { freeRig } from "@/lib/campaigns/free-rig";
import { leavePark } from "@/lib/campaigns/leave-park";
import { nothingToPark } from "@/lib/campaigns/nothing-to-park";
import { parkFailed } from "@/lib/campaigns/park-failed";
import { perform } from "@/lib/campaigns/perform";
import { settlePhase } from "@/lib/campaigns/settle-phase";
import { startQueued } from "@/lib/campaigns/start";
import { change, inTransaction, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { next, redirect } from "@/lib/protocol/interpreter";
import { fitStep } from "@/lib/readings/fit-step";

type Advance = { campaignId: string; now: Date };

/** More turns than this without a step for anybody is a fault of ours, not of a protocol: every wait and ask ends the loop. */
const MOST_TURNS = 1000;

/**
 * Brings a campaign as far as it can go by itself: fits what is unfitted, closes the phase, judges limits, and makes the next
 * step; starts it when it is queued and its time has come. Safe to call at any time, by any process, any number of times.
 */
export async function advanceCampaign({ campaignId, now }: Advance): Promise<void> {
  const unfitted = await row<{ id: string }>(
    `select s.id from step s where s.campaign_id = $1 and s.kind = 'measure' and s.state in ('done', 'failed', 'skipped')
      order by s.sequence desc limit 1`,
    [campaignId],
  );
  if (unfitted) await fitStep({ stepId: unfitted.id, now });

  await inTransaction(async (transaction) => {
    const campaign = await lockCampaign(transaction, { campaignId, now });
    if (!campaign?.needsAdvance) return;
    await change(`update campaign set needs_advance = false where id = $1`, [campaignId], transaction);
    if (campaign.state === "queued") return startQueued(transaction, { campaign, now });
    await goOn(transaction, campaign, now);
  });
}

async function goOn(transaction: Transaction, locked: CampaignRow, now: Date): Promise<void> {
  let campaign = locked;
  for (let turn = 0; turn < MOST_TURNS; turn++) {
    if (!campaign.cursor || campaign.setAside) return;
    if (campaign.state === "running" && ((await checkMount(transaction, { campaign, now })) || (await leavePark(transaction, campaign)))) {
      campaign = await again(transaction, campaign, now);
      continue;
    }
    const parks = campaign.parking === "wanted" || campaign.parking === "running";
    const { open, last } = await openAndLast(transaction, campaign.id);
    if (open) {
      const due = open.kind === "wait" && open.dueAt && campaign.clock && open.dueAt <= campaign.clock;
      if (due && (campaign.state === "running" || open.detour === "park")) {
        await closeStep(transaction, { stepId: open.id, clock: open.dueAt as Date, now });
        continue;
      }
      if (open.kind === "ask" && campaign.state === "running") {
        await closeStep(transaction, { stepId: open.id, clock: campaign.clock ?? now, now });
        continue;
      }
      if (open.state === "ready") await notify(`rig:${campaign.rigId}`, transaction);
      if (!parks || open.detour === "park" || open.state === "out") return;
      if (await nothingToPark(transaction, campaign, open)) return;
      await skipStep(transaction, { stepId: open.id, now });
      continue;
    }

    if (last?.state === "failed" && (await nothingToPark(transaction, campaign, last))) return;
    if (last && (await settlePhase(transaction, { campaign, step: last, now }))) {
      campaign = await again(transaction, campaign, now);
      continue;
    }
    if (campaign.parking === "running" && last?.detour === "park" && last.state === "failed") return parkFailed(transaction, { campaign, step: last, now });
    if (campaign.parking === "wanted") {
      const cursor = redirect(campaign.definition, campaign.cursor, { kind: "park" });
      if ("impossible" in cursor) return freeRig(transaction, campaign);
      await change(`update campaign set parking = 'running', cursor = $2 where id = $1`, [campaign.id, JSON.stringify(cursor)], transaction);
      campaign = { ...campaign, parking: "running", cursor };
    }
    if (campaign.state !== "running" && campaign.parking !== "running") return;
    if (!campaign.clock || !campaign.abilities) return;

    const facts = await gatherFacts(transaction, { campaign, last, now });
    const { cursor, action } = next(campaign.definition, campaign.cursor as NonNullable<typeof campaign.cursor>, facts);
    campaign = { ...campaign, cursor };
    await perform(transaction, { campaign, cursor, action, now });
    if (action.do === "step") {
      const forServer = action.step.kind === "wait";
      if (!forServer) return;
    } else if (action.do !== "parked") {
      return;
    }
    campaign = await again(transaction, campaign, now);
  }
  throw new Error(`campaign ${locked.id} went ${MOST_TURNS} turns without coming to rest`);
}

async function again(transaction: Transaction, { id }: CampaignRow, now: Date): Promise<CampaignRow> {
  const campaign = await readLocked(transaction, { campaignId: id, now });
  if (!campaign) throw new Error(`campaign ${id} is gone`);
  return campaign;
}
