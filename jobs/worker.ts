import "../scripts/lib/env-file.mjs";
import { PgBoss } from "pg-boss";
import { startFastPath } from "@/jobs/fast-path";
import { buryMail, queueMail, sendMail } from "@/jobs/mail";
import { createQueues, payloads, send, type Payload, type QueueName } from "@/jobs/queues";
import { sweep } from "@/jobs/sweep";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance, findNextDue } from "@/lib/campaigns/to-advance";
import { sequelize } from "@/lib/db";
import { env } from "@/lib/env";
import { listener } from "@/lib/listener";
import { log } from "@/lib/log";

const BACKSTOP_S = 10;

async function main(): Promise<void> {
  const boss = new PgBoss({ connectionString: env().DATABASE_URL, useListenNotify: true, max: 4, superviseIntervalSeconds: 30 });
  boss.on("error", (error) => log.error({ error: String(error) }, "queue"));
  boss.on("warning", ({ message }) => log.warn(message));
  await boss.start();
  await createQueues(boss);

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
  await work(boss, "sweep", 1, async () => {
    try {
      await sweep();
    } finally {
      await queueMail(boss);
      await planDue();
    }
  });
  await boss.schedule("sweep", "* * * * *", {});

  const stopFastPath = await startFastPath({
    onError: (key, error) => log.error({ key, error: error instanceof Error ? error.stack : String(error) }, "fast path"),
    onMail: () => queueMail(boss),
    onAdvanced: planDue,
  });
  log.info("worker ready");

  let stopping = false;
  const stop = async () => {
    if (stopping) return;
    stopping = true;
    await stopFastPath();
    await boss.stop({ graceful: true, timeout: 10_000 });
    await listener().close();
    await sequelize.close();
    log.info("worker stopped");
  };
  for (const signal of ["SIGINT", "SIGTERM"] as const) {
    process.on(signal, () => void stop().then(() => process.exit(0), () => process.exit(1)));
  }
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

main().catch((error: unknown) => {
  log.fatal({ error: error instanceof Error ? error.stack : String(error) }, "worker could not start");
  process.exit(1);
});
