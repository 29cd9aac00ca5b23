import type { SlotBindings } from "@/lib/campaigns/bindings";
import { checkCampaign } from "@/lib/campaigns/check";
import { createCampaign } from "@/lib/campaigns/create";
import { queueCampaign } from "@/lib/campaigns/queue";
import { row } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";

type DemoCampaign = {
  by: Actor;
  now: Date;
  name: string;
  protocolVersionId: string;
  sensorId: string;
  rigId: string;
  slots: SlotBindings;
  startAt?: Date;
};

/** The campaign of this name, made and queued unless it is already; the researcher gives a word on each caution. */
export async function ensureQueued({ name, by, now, ...draft }: DemoCampaign): Promise<string> {
  const found = await row<{ id: string; state: string }>(`select id, state from campaign where name = $1`, [name]);
  if (found && found.state !== "draft") return found.id;
  const campaignId = found?.id ?? (await createCampaign({ ...draft, name, by, now })).id;
  const { cautions } = await checkCampaign({ ...draft, by, now });
  await queueCampaign({ by, now, campaignId, acknowledgements: cautions.map(({ code }) => code) });
  return campaignId;
}
