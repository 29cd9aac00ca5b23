import { watchSilence } from "@/lib/alarms/silence";
import { watchAlarms } from "@/lib/alarms/watch-alarms";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { fitLeftovers } from "@/lib/readings/fit-leftovers";
import { tidyUp } from "@/lib/tidy-up";

/** Once a minute: what a crash left, what fell due by the clock, who is silent, whose shelf ends, what is old. */
export async function sweep(): Promise<void> {
  const now = new Date();
  for (const campaignId of await findCampaignsToAdvance({ now })) await advanceCampaign({ campaignId, now: new Date() });
  await fitLeftovers();
  await watchSilence({ now });
  await watchAlarms({ now });
  await tidyUp({ now });
}
