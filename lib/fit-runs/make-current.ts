import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, inTransaction, row, rows } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { takeUpPhase } from "@/lib/fit-runs/carry-on";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import type { Definition } from "@/lib/protocol/schema";
import type { FoundOnRefit } from "@/models/json";

type MakeCurrent = { by: Actor; fitRunId: string; now: Date };

type Run = { campaignId: string; current: boolean; state: "waiting" | "ready" | "cancelled"; why: string | null };

/**
 * From now on the campaign's pages, limits and exports use this fit run. Decisions and alarms of the past keep the run they were made with;
 * a limit that only this run breaks becomes an alarm "found on refit", which holds and mails nothing. @throws AppError 403, 404, 409.
 */
export function makeCurrent({ by, fitRunId, now }: MakeCurrent): Promise<{ id: string; current: true }> {
  return inTransaction(async (transaction) => {
    demand(by, "fit again");
    // Rig, campaign, then the run: in the order in which everybody takes them.
    await row(`select rig.id from rig join campaign c on c.rig_id = rig.id join fit_run f on f.campaign_id = c.id where f.id = $1 for no key update of rig`, [fitRunId], transaction);
    await row(`select c.id from campaign c join fit_run f on f.campaign_id = c.id where f.id = $1 for no key update of c`, [fitRunId], transaction);
    const run = await row<Run>(`select campaign_id as "campaignId", current, state, why from fit_run where id = $1 for no key update`, [fitRunId], transaction);
    if (!run) throw notFound("fit run");
    if (run.current) return { id: fitRunId, current: true as const };
    if (run.state !== "ready") throw conflict(run.state === "waiting" ? "This fit run is still being made; wait until it is finished" : "This fit run was cancelled; fit again");

    await catchUp(transaction, { fitRunId, campaignId: run.campaignId, now });
    await change(`update fit_run set current = false where campaign_id = $1 and current`, [run.campaignId], transaction);
    await change(`update fit_run set current = true where id = $1`, [fitRunId], transaction);
    const alarms = await tell(transaction, { fitRunId, campaignId: run.campaignId, now });
    await audit(transaction, { by, now, action: "make fit run current", entity: "campaign", entityId: run.campaignId, detail: { fitRunId, alarms } });
    await recordEvent(transaction, { campaignId: run.campaignId, now, kind: "refit", who: by.name, text: `Uses the fits made again: ${run.why ?? "as they were at first"}` });
    await notify(`changed:campaign:${run.campaignId}`, transaction);
    await notify(`campaign:${run.campaignId}`, transaction);
    return { id: fitRunId, current: true as const };
  });
}

type About = { fitRunId: string; campaignId: string; now: Date };

/** Phases that closed since the run was made: a few, while the campaign goes on. */
async function catchUp(transaction: Transaction, { fitRunId, campaignId, now }: About): Promise<void> {
  const since = await rows<{ stepId: string; definition: Definition | null }>(
    `select p.step_id as "stepId", v.definition from phase p join step s on s.id = p.step_id left join protocol_version v on v.id = s.protocol_version_id
      where p.campaign_id = $2 and p.closed_at is not null and not exists (select 1 from phase_summary where phase_id = p.id and fit_run_id = $1)
      order by p.sequence`,
    [fitRunId, campaignId],
    transaction,
  );
  for (const phase of since) await takeUpPhase(transaction, { ...phase, fitRunId, campaignId, now });
}

type Concerned = { rigId: string; sensorId: string; rig: string; serial: string; clock: Date | null; found: FoundOnRefit[] };

async function tell(transaction: Transaction, { fitRunId, campaignId, now }: About): Promise<number> {
  const concerned = await row<Concerned>(
    `select c.rig_id as "rigId", c.sensor_id as "sensorId", rig.name as rig, s.serial, f.found,
            case when rig.clock = 'simulated' then rig.reported_clock end as clock
       from fit_run f join campaign c on c.id = f.campaign_id join rig on rig.id = c.rig_id join sensor s on s.id = c.sensor_id where f.id = $1`,
    [fitRunId],
    transaction,
  );
  let opened = 0;
  for (const { limitId, kind, phaseId, stepId, cycle, value, limit, unit, text } of concerned?.found ?? []) {
    const { rigId, sensorId, rig, serial, clock } = concerned as Concerned;
    const told = await row(`select id from alarm where campaign_id = $1 and limit_id = $2 limit 1`, [campaignId, limitId], transaction);
    if (told) continue;
    const alarm = await openAlarm(transaction, {
      now,
      clock,
      rigId,
      campaignId,
      sensorId,
      source: "limit",
      limitId,
      kind,
      phaseId,
      stepId,
      fitRunId,
      value,
      limitValue: limit,
      unit,
      text: `${serial} on ${rig}, cycle ${cycle}: ${text}`,
      actionText: "Found when the campaign was fitted again; nothing was held or stopped for it.",
      foundOnRefit: true,
      mail: false,
    });
    if (alarm.opened) opened++;
  }
  return opened;
}
