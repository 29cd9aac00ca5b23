import { KeyedQueue } from "@/jobs/keyed-queue";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { listener } from "@/lib/listener";
import { fitStep } from "@/lib/readings/fit-step";

type Options = { onError: (key: string, error: unknown) => void; onMail: () => void };

/**
 * Acts at once on what others commit: readings are fitted as they arrive, a finished step leads to the next. The same use cases
 * run from the sweep job, so whatever is missed here is found there.
 *
 * @returns Ends listening and waits for the work in hand.
 */
export async function startFastPath({ onError, onMail }: Options): Promise<() => Promise<void>> {
  const queue = new KeyedQueue(onError);
  const advance = (campaignId: string) => queue.run(`campaign:${campaignId}`, () => advanceCampaign({ campaignId, now: new Date() }));
  const catchUp = () =>
    queue.run("catch up", async () => {
      for (const campaignId of await findCampaignsToAdvance({ now: new Date() })) advance(campaignId);
    });

  const unsubscribe = await listener().subscribe((topic) => {
    const [what, key] = topic.split(":", 2);
    if (what === "campaign") advance(key);
    else if (what === "fit") queue.run(topic, () => fitStep(key));
    else if (what === "mail") onMail();
    else if (what === "*") {
      catchUp();
      onMail();
    }
  });
  catchUp();
  return async () => {
    unsubscribe();
    await queue.idle();
  };
}
