import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { CampaignState } from "@/lib/campaigns/schema";
import { rows } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import type { Cursor, RigAbilities } from "@/lib/protocol/types";
import { OCCUPIES } from "@/lib/rigs/read";
import type { PlannedCampaign } from "@/models/json";

export type LaneRig = { id: string; name: string; timeZone: string; now: Date | null; abilities: RigAbilities | null };

/** A campaign that is on a rig or in its line, with what its plan follows from. */
export type OpenCampaign = {
  id: string;
  rigId: string;
  name: string;
  state: CampaignState;
  sensor: string;
  definition: Definition;
  cursor: Cursor | null;
  startAt: Date | null;
  startedClock: Date | null;
  planned: PlannedCampaign | null;
  priority: number;
  nominalF0Hz: number;
  nominalQ: number;
  holds: HoldReason[];
};

/** Rigs in use by name, all or one; 200 at most. */
export const readLaneRigs = (rigId: string | undefined, now: Date): Promise<LaneRig[]> =>
  rows<LaneRig>(
    `select id, name, time_zone as "timeZone", case when clock = 'simulated' then reported_clock else $1::timestamptz end as now, abilities
       from rig where retired_at is null and ($2::bigint is null or id = $2) order by name, id limit 200`,
    [now, rigId ?? null],
  );

/** What is on the rigs, then their lines in the order in which they are taken. */
export const readOpenCampaigns = (rigIds: readonly string[]): Promise<OpenCampaign[]> =>
  rows<OpenCampaign>(
    `select c.id, c.rig_id as "rigId", c.name, c.state, s.serial as sensor, v.definition, c.cursor, c.start_at as "startAt", c.started_clock as "startedClock",
            c.planned, c.priority, s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ",
            array(select distinct h.reason from hold h where h.campaign_id = c.id and h.released_at is null order by 1) as holds
       from campaign c join sensor s on s.id = c.sensor_id join protocol_version v on v.id = c.protocol_version_id
      where c.rig_id = any($1::bigint[]) and (c.state = 'queued' or (${OCCUPIES}))
      order by c.rig_id, c.state = 'queued', c.priority desc, c.queued_at, c.id`,
    [rigIds],
  );

export type BlockedRow = { id: string; rigId: string; from: Date; to: Date; why: string };

/** Blocked times that end after a time, in the order in which they begin. */
export const readBlocked = (rigIds: readonly string[], since: Date): Promise<BlockedRow[]> =>
  rows<BlockedRow>(
    `select id, rig_id as "rigId", lower(period) as "from", upper(period) as "to", why from maintenance_window
      where rig_id = any($1::bigint[]) and withdrawn_at is null and upper(period) > $2 order by lower(period)`,
    [rigIds, since],
  );
