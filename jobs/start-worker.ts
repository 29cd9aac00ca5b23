import { PgBoss } from "pg-boss";
import { startFastPath } from "@/jobs/fast-path";
import { makeImport, queueImports } from "@/jobs/import";
import { buryMail, queueMail, sendMail } from "@/jobs/mail";
import { createQueues, payloads, send, type Payload, type QueueName, type QueueSettings } from "@/jobs/queues";
import { makeRefit, queueRefits } from "@/jobs/refit";
import { sweep } from "@/jobs/sweep";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance, findNextDue } from "@/lib/campaigns/to-advance";
import { env } from "@/lib/env";
import { log } from "@/lib/log";

const BACKSTOP_S = 10;

type Options = {
  /** How often the queue looks after lost workers and late jobs. */
  superviseIntervalSeconds?: number;
  /** In place of what `queues.ts` says: how often mail is tried, for example. */
  settings?: QueueSettings;
};

/**
 * Everything a worker process does: the fast path, mail, due times and the sweep of every minute. Any number may run.
 *
 * @returns Ends it, after the jobs in hand.
 */
export async function startWorker({ superviseIntervalSeconds = 30, settings = {} }: Options = {}): Promise<() => Promise<void>> {
  const boss = new PgBoss({ connectionString: env().DATABASE_URL, useListenNotify: true, max: 4, superviseIntervalSeconds, monitorIntervalSeconds: superviseIntervalSeconds });
  boss.on("error", (error) => log.error({ error: String(error) }, "queue"));
  boss.on("warning", ({ message }) => log.warn(message));
  await boss.start();
  await createQueues(boss, settings);

  /** Keeps the due time in the queue as well; it stands in our own tables, where the sweep finds it if the job is lost. */
  const planDue = async () => {
    for (const { campaignId, dueAt } of await findNextDue({ now: new Date() })) {
      await send(boss, "advance", { campaignId }, { key: `${campaignId}:${dueAt.getTime()}`, startAfter: dueAt });
    }
  };

  await work(boss, "mail", 2, sendMail);
  await work(boss, "mail-dead", 1, buryMail);
  await work(boss, "advance", 2, async ({ campaignId }) => {
    await findCampaignsToAdvance({ now: new Date() });
    await advanceCampaign({ campaignId, now: new Date() });
    await planDue();
  });
  let isEnding = false;
  await work(boss, "refit", 1, (data) => makeRefit(data, { isEnding: () => isEnding }));
  await work(boss, "import", 1, (data) => makeImport(data, { isEnding: () => isEnding }));
  await work(boss, "sweep", 1, async () => {
    try {
      await sweep();
    } finally {
      await queueMail(boss);
      await queueRefits(boss);
      await queueImports(boss);
      await planDue();
    }
  });
  await boss.schedule("sweep", "* * * * *", {});

  const stopFastPath = await startFastPath({
    onError: (key, error) => log.error({ key, error: error instanceof Error ? error.stack : String(error) }, "fast path"),
    onMail: () => queueMail(boss),
    onRefit: () => queueRefits(boss),
    onImport: () => queueImports(boss),
    onAdvanced: planDue,
  });
  await queueMail(boss);
  await queueRefits(boss);
  await queueImports(boss);
  return async () => {
    isEnding = true;
    await stopFastPath();
    await boss.stop({ graceful: true, timeout: 10_000 });
  };
}

/** Each of `count` workers takes one job at a time; one notification wakes one fetch, so it is woken again after every job. */
async function work<Name extends QueueName>(boss: PgBoss, name: Name, count: number, handle: (data: Payload<Name>) => Promise<unknown>) {
  for (let i = 0; i < count; i++) {
    const id: string = await boss.work(name, { batchSize: 1, pollingIntervalSeconds: 2, notifyPollingIntervalSeconds: BACKSTOP_S }, async ([job]) => {
      try {
        await handle(payloads[name].parse(job.data) as Payload<Name>);
      } catch (error) {
        log.error({ name, error: error instanceof Error ? error.stack : String(error) }, "job");
        throw error;
      } finally {
        boss.notifyWorker(id);
      }
    });
  }
}
