import { findFitRun } from "@/lib/analysis/select-phases";
import { campaignCode } from "@/lib/campaigns/code";
import { row } from "@/lib/db";
import { notFound } from "@/lib/errors";
import type { About } from "@/lib/export/table";
import type { FitSettings } from "@/models/json";

type Found = {
  name: string;
  origin: string;
  state: string;
  startedAt: Date | null;
  endedAt: Date | null;
  sensor: string | null;
  rig: string | null;
  timeZone: string | null;
  protocol: string | null;
  version: number | null;
  readout: string | null;
  settings: FitSettings | null;
  codeVersion: string | null;
  fittedAt: Date | null;
};

/** Where the numbers of an export come from: sensor, rig, protocol version, fit run. @throws AppError 404. */
export async function aboutCampaign({ campaignId, fitRunId, now }: { campaignId: string; fitRunId?: string; now: Date }): Promise<About> {
  const run = await findFitRun(campaignId, fitRunId);
  const found = await row<Found>(
    `select c.name, c.origin, c.state, coalesce(c.started_clock, c.started_at) as "startedAt", coalesce(c.ended_clock, c.ended_at) as "endedAt", s.serial as sensor,
            rig.name as rig, rig.time_zone as "timeZone", p.name as protocol, v.version, v.definition->>'readout' as readout, f.settings,
            f.code_version as "codeVersion", f.created_at as "fittedAt"
       from campaign c left join sensor s on s.id = c.sensor_id left join rig on rig.id = c.rig_id
       left join protocol_version v on v.id = c.protocol_version_id left join protocol p on p.id = v.protocol_id
       left join fit_run f on f.id = $2
      where c.id = $1`,
    [campaignId, run ?? null],
  );
  if (!found) throw notFound("campaign");
  const { settings } = found;
  const lines: [string, string | number | null | undefined][] = [
    ["Campaign", campaignCode(campaignId)],
    ["Name", found.name],
    ["Origin", found.origin],
    ["State", found.state],
    ["Started", found.startedAt?.toISOString()],
    ["Ended", found.endedAt?.toISOString()],
    ["Sensor", found.sensor],
    ["Rig", found.rig],
    ["Time zone of the rig", found.timeZone],
    ["Protocol", found.protocol],
    ["Protocol version", found.version],
    ["Readout", settings?.readout ?? found.readout],
    ["Fit run", run],
    ["Offset slope fitted", settings && (settings.offsetSlope ? "yes" : "no")],
    ["Version of the fit", found.codeVersion],
    ["Fit run begun", found.fittedAt?.toISOString()],
    ["Exported", now.toISOString()],
    ["Times", "UTC, RFC 3339, by the rig's clock"],
    ["Uncertainties", "standard uncertainties (k = 1) unless a column says otherwise"],
  ];
  return lines.flatMap(([label, value]) => (value === null || value === undefined ? [] : [[label, value] as const]));
}
