import { KeyedQueue } from "@/jobs/keyed-queue";
import { refreshResults } from "@/lib/analysis/refresh-results";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { listener } from "@/lib/listener";
import { fitStep } from "@/lib/readings/fit-step";

type Options = {
  onError: (key: string, error: unknown) => void;
  onMail: () => Promise<void>;
  onRefit: () => Promise<void>;
  onImport: () => Promise<void>;
  /** A campaign has moved: it may have a new time to be looked at. */
  onAdvanced: () => Promise<void>;
};

/**
 * Acts at once on what others commit: readings are fitted as they arrive, a finished step leads to the next. The same use cases
 * run from the sweep job, so whatever is missed here is found there. What a closed phase changes in the analysis is computed
 * when its transaction has ended, which the next step left with.
 *
 * @returns Ends listening and waits for the work in hand.
 */
export async function startFastPath({ onError, onMail, onRefit, onImport, onAdvanced }: Options): Promise<() => Promise<void>> {
  const queue = new KeyedQueue(onError);
  const advance = (campaignId: string) => queue.run(`campaign:${campaignId}`, async () => {
      await advanceCampaign({ campaignId, now: new Date() });
      queue.run("due", onAdvanced);
    });
  const catchUp = () =>
    queue.run("catch up", async () => {
      for (const campaignId of await findCampaignsToAdvance({ now: new Date() })) advance(campaignId);
    });

  const unsubscribe = await listener().subscribe((topic) => {
    const [what, key, from] = topic.split(":", 3);
    if (what === "campaign") advance(key);
    else if (what === "fit") queue.run(topic, () => fitStep({ stepId: key, from: Number(from), now: new Date() }));
    else if (what === "phases") queue.run(`results:${key}`, () => refreshResults({ campaignId: key }));
    else if (what === "mail") queue.run("mail", onMail);
    else if (what === "refit") queue.run("refit", onRefit);
    else if (what === "imports") queue.run("imports", onImport);
    else if (what === "*") {
      catchUp();
      queue.run("mail", onMail);
    }
  });
  catchUp();
  return async () => {
    unsubscribe();
    await queue.idle();
  };
}
