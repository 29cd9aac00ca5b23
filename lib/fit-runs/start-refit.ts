import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import type { RefitBody } from "@/lib/fit-runs/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { FIT_CODE_VERSION } from "@/lib/readings/fit-code-version";
import { FitRun } from "@/models/fit-run";

type Start = { by: Actor; campaignId: string; body: RefitBody; now: Date };

/** Has a campaign fitted again with other settings, beside what there is. A worker takes it up at once. @throws AppError 403, 404, 409. */
export function startRefit({ by, campaignId, body: { why, ...settings }, now }: Start): Promise<{ id: string }> {
  return inTransaction(async (transaction) => {
    demand(by, "fit again");
    const campaign = await row<{ started: boolean; total: number }>(
      `select c.started_at is not null as started, (select coalesce(sum(s.stored), 0)::int from step s join phase p on p.step_id = s.id
          where s.campaign_id = c.id and p.closed_at is not null) as total
         from campaign c where c.id = $1 for no key update of c`,
      [campaignId],
      transaction,
    );
    if (!campaign) throw notFound("campaign");
    if (campaign.total === 0) throw conflict("No phase of this campaign has closed yet, so there is nothing to fit again");
    const waiting = await row(`select id from fit_run where campaign_id = $1 and state = 'waiting'`, [campaignId], transaction);
    if (waiting) throw conflict("This campaign is being fitted again already; wait for that run, or cancel it");
    const run = await FitRun.create(
      { campaignId, settings, codeVersion: FIT_CODE_VERSION, current: false, state: "waiting", total: campaign.total, why, createdBy: by.id, createdAt: now },
      { transaction },
    );
    await audit(transaction, { by, now, action: "fit again", entity: "campaign", entityId: campaignId, detail: { fitRunId: run.id, ...settings, why } });
    await recordEvent(transaction, { campaignId, now, kind: "refit", who: by.name, text: `Fits again: ${why}` });
    await notify(`refit:${run.id}`, transaction);
    await notify(`changed:campaign:${campaignId}`, transaction);
    return { id: run.id };
  });
}
