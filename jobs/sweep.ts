import { watchSilence } from "@/lib/alarms/silence";
import { watchAlarms } from "@/lib/alarms/watch-alarms";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { fillLevels } from "@/lib/phases/fill-levels";
import { fitLeftovers } from "@/lib/readings/fit-leftovers";
import { tidyUp } from "@/lib/tidy-up";

/** This process and the web start together; whoever was not heard before that may have spoken to nobody. */
const listeningSince = new Date(Date.now() - process.uptime() * 1000);

/**
 * Once a minute: what a crash left, what fell due by the clock, who is silent, whose shelf ends, what is old. One campaign that
 * cannot go on keeps nothing else from its turn.
 *
 * @throws AggregateError at the end, with everything that failed on the way.
 */
export async function sweep(): Promise<void> {
  const now = new Date();
  const failures: unknown[] = [];
  const each = (work: Promise<void>) => work.catch((error: unknown) => void failures.push(error));

  for (const campaignId of await findCampaignsToAdvance({ now })) await each(advanceCampaign({ campaignId, now: new Date() }));
  await each(fitLeftovers({ now }));
  await each(fillLevels());
  await each(watchSilence({ now, listeningSince }));
  await each(watchAlarms({ now }));
  await each(tidyUp({ now }));
  if (failures.length > 0) throw new AggregateError(failures, failures.map(String).join("; "));
}
