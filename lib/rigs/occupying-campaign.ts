import type { Transaction } from "sequelize";
import { row } from "@/lib/db";
import { OCCUPIES } from "@/lib/rigs/read";
import type { Campaign } from "@/models/campaign";

export type OccupyingCampaign = { id: string; name: string; state: Campaign["state"]; sensorId: string };

/** The campaign that a rig runs, holds or is still parking, locked; undefined when the rig is free. */
export function occupyingCampaign(rigId: string, transaction: Transaction): Promise<OccupyingCampaign | undefined> {
  return row<OccupyingCampaign>(
    `select c.id, c.name, c.state, c.sensor_id as "sensorId" from campaign c where c.rig_id = $1 and ${OCCUPIES} for no key update`,
    [rigId],
    transaction,
  );
}
