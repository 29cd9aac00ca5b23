import { acknowledgeAlarm } from "@/lib/alarms/acknowledge";
import { clearAlarm } from "@/lib/alarms/clear";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { row, rows } from "@/lib/db";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import type { Team } from "./people";

type Alarm = { id: string; kind: string; state: string; value: number; limit: number };
type Case = { team: Team; campaignId: string };

const CLEAN_AGAIN = "Residue of Calder 12: the air reference creeps down with every cycle. Rinses checked, nothing leaks; it goes on and we watch it.";
const CLAMPED_AGAIN = "The clamp had slipped: half a turn loose, the wire sat visibly lower. Clamped again, new mount, new baseline.";
const WELL_KNOWN = "The same residue as before, slope unchanged. Rinse with the longer programme in the next campaign.";

/**
 * What operator and researcher of the demo do about the alarms of a campaign: the operator takes each on; where the campaign holds, a
 * slip gets the sensor clamped anew and residue gets a note, then it goes on. Returns how many alarms were dealt with.
 */
export async function lookAfter({ team, campaignId }: Case): Promise<number> {
  const open = await rows<Alarm>(
    `select id, kind, state, value, limit_value as "limit" from alarm where campaign_id = $1 and source = 'limit' and state <> 'cleared' order by id`,
    [campaignId],
  );
  for (const alarm of open) {
    if (alarm.state === "unacknowledged" || alarm.state === "returned") await acknowledgeAlarm({ by: team.operator, alarmId: alarm.id, now: new Date() });
  }
  const held = await row(`select id from hold where campaign_id = $1 and reason = 'limit' and released_at is null`, [campaignId]);
  if (!held) return open.length;

  const slipped = open.some(({ kind, value, limit }) => kind === "return" && Math.abs(value) > limit);
  if (slipped) await clampAgain({ team, campaignId });
  await clearAll({ team, campaignId }, slipped ? CLAMPED_AGAIN : CLEAN_AGAIN);
  await resumeCampaign({ by: team.researcher, campaignId, from: "here", now: new Date() });
  return open.length;
}

/** After the end nothing stays open that somebody has understood. */
export const closeTheBooks = (given: Case): Promise<void> => clearAll(given, WELL_KNOWN);

async function clearAll({ team, campaignId }: Case, note: string): Promise<void> {
  const open = await rows<{ id: string }>(`select id from alarm where campaign_id = $1 and state <> 'cleared' order by id`, [campaignId]);
  for (const { id: alarmId } of open) await clearAlarm({ by: team.researcher, alarmId, note, now: new Date() });
}

/** The new mount begins where the rig's clock stands. */
async function clampAgain({ team, campaignId }: Case): Promise<void> {
  const place = await row<{ sensorId: string; rigId: string; clock: Date }>(
    `select c.sensor_id as "sensorId", c.rig_id as "rigId", rig.reported_clock as clock from campaign c join rig on rig.id = c.rig_id where c.id = $1`,
    [campaignId],
  );
  if (!place) return;
  const { sensorId, rigId, clock } = place;
  await mountSensor({ by: team.operator, now: new Date(), sensorId, rigId, mountedAt: clock, note: "Clamped again after a slip" });
}
