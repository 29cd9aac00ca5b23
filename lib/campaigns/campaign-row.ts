import type { Transaction } from "sequelize";
import { row } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import type { Cursor, RigAbilities } from "@/lib/protocol/types";

/** A campaign with what dispatch needs of its rig, sensor and protocol version, its row locked. */
export type CampaignRow = {
  id: string;
  name: string;
  state: "draft" | "queued" | "running" | "held" | "finished" | "stopped" | "failed";
  parking: "none" | "wanted" | "running" | "parked";
  setAside: boolean;
  needsAdvance: boolean;
  cursor: Cursor | null;
  startAt: Date | null;
  mountId: string | null;
  /** Where the sensor is now on this rig, by whichever clock is ahead; null when it is not. */
  presentMountId: string | null;
  /** Null before the start. */
  fitRunId: string | null;
  protocolVersionId: string;
  definition: Definition;
  sensorId: string;
  serial: string;
  nominalF0Hz: number;
  nominalQ: number;
  rigId: string;
  rigName: string;
  timeZone: string;
  abilities: RigAbilities | null;
  /** Protocol time; null before a simulated rig's first report. */
  clock: Date | null;
};

const CAMPAIGN = `
  select c.id, c.name, c.state, c.parking, c.set_aside as "setAside", c.needs_advance as "needsAdvance", c.cursor, c.start_at as "startAt",
         c.mount_id as "mountId", c.protocol_version_id as "protocolVersionId", v.definition, c.sensor_id as "sensorId", s.serial,
         s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ", c.rig_id as "rigId", rig.name as "rigName", rig.time_zone as "timeZone",
         rig.abilities, case when rig.clock = 'real' then $2::timestamptz else rig.reported_clock end as clock,
         (select id from mount where sensor_id = c.sensor_id and rig_id = c.rig_id and upper_inf(period)
             and lower(period) <= case when rig.clock = 'real' then $2::timestamptz else greatest($2::timestamptz, rig.reported_clock) end) as "presentMountId",
         (select id from fit_run where campaign_id = c.id and current) as "fitRunId"
    from campaign c
    join protocol_version v on v.id = c.protocol_version_id
    join sensor s on s.id = c.sensor_id
    join rig on rig.id = c.rig_id
   where c.id = $1
   for no key update of c`;

/**
 * Locks rig, then campaign: everybody takes them in this order, so that nobody waits in a circle. Undefined when there is no
 * such campaign, or it did not come from a protocol.
 */
export async function lockCampaign(transaction: Transaction, { campaignId, now }: { campaignId: string; now: Date }): Promise<CampaignRow | undefined> {
  await row(`select id from rig where id = (select rig_id from campaign where id = $1) for no key update`, [campaignId], transaction);
  return readLocked(transaction, { campaignId, now });
}

/** The row again, for whoever has locked it already. */
export const readLocked = (transaction: Transaction, { campaignId, now }: { campaignId: string; now: Date }) =>
  row<CampaignRow>(CAMPAIGN, [campaignId, now], transaction);
