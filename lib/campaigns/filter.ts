import type { CampaignQuery } from "@/lib/campaigns/answers";

type Filter = Partial<Pick<CampaignQuery, "state" | "rigId" | "sensorId" | "protocolId" | "search">>;

/** A campaign that was set aside waits for a rig like a queued one, so it stands in line. */
export const STATES: Record<NonNullable<CampaignQuery["state"]>, string> = {
  "on-rigs": "(c.state in ('running', 'held') and not c.set_aside)",
  "in-line": "(c.state = 'queued' or (c.state = 'held' and c.set_aside))",
  done: "c.state in ('finished', 'stopped', 'failed')",
  draft: "c.state = 'draft'",
};

/** A filter as a condition on `c`, `v`, `s`, `rig` and `p`; its values take the places from `first` on. */
export function campaignWhere({ state, rigId, sensorId, protocolId, search }: Filter, first: number): { where: string; bind: unknown[] } {
  const [rig, sensor, protocol, words] = [0, 1, 2, 3].map((place) => `$${first + place}`);
  return {
    where: `${state ? STATES[state] : "true"} and (${rig}::bigint is null or c.rig_id = ${rig}) and (${sensor}::bigint is null or c.sensor_id = ${sensor})
      and (${protocol}::bigint is null or v.protocol_id = ${protocol})
      and (${words}::text is null or c.name ilike ${words} or s.serial ilike ${words} or rig.name ilike ${words} or p.name ilike ${words} or 'C-' || c.id ilike ${words})`,
    bind: [rigId ?? null, sensorId ?? null, protocolId ?? null, search ? `%${search.replace(/[\\%_]/g, "\\$&")}%` : null],
  };
}
