import { PgBoss } from "pg-boss";
import { z } from "zod";

const DAY_S = 86_400;

/** What a job carries: ids only, never data. */
export const payloads = {
  mail: z.object({ notificationId: z.string() }),
  "mail-dead": z.object({ notificationId: z.string() }),
  advance: z.object({ campaignId: z.string() }),
  refit: z.object({ fitRunId: z.string() }),
  import: z.object({ importRunId: z.string() }),
  sweep: z.object({}),
} as const;

export type QueueName = keyof typeof payloads;
export type Payload<Name extends QueueName> = z.output<(typeof payloads)[Name]>;

/**
 * Every queue with its policy, dead-letter queues first. Retention counts from the due time, so a job for a start in 90 days is
 * kept that long and then waits 30 days more for a worker that is away; the due time stands in our own tables too.
 */
const QUEUES = [
  { name: "mail-dead", policy: "standard", retentionSeconds: 90 * DAY_S, deleteAfterSeconds: 90 * DAY_S, notify: true },
  {
    name: "mail",
    policy: "exclusive",
    deadLetter: "mail-dead",
    retryLimit: 10,
    retryDelay: 2,
    retryBackoff: true,
    retryDelayMax: 3600,
    expireInSeconds: 120,
    retentionSeconds: 30 * DAY_S,
    notify: true,
  },
  { name: "advance", policy: "exclusive", retryLimit: 5, retryDelay: 1, retryBackoff: true, expireInSeconds: 300, retentionSeconds: 30 * DAY_S, notify: true },
  // As long as it takes; a worker that is gone is missed after half a minute.
  { name: "refit", policy: "exclusive", retryLimit: 20, retryDelay: 1, retryBackoff: true, retryDelayMax: 60, expireInSeconds: DAY_S, heartbeatSeconds: 30, notify: true },
  { name: "import", policy: "exclusive", retryLimit: 5, retryDelay: 1, retryBackoff: true, retryDelayMax: 60, expireInSeconds: DAY_S, heartbeatSeconds: 30, notify: true },
  { name: "sweep", policy: "short", retryLimit: 1, expireInSeconds: 120, retentionSeconds: 3600, deleteAfterSeconds: 3600, notify: true },
] as const satisfies readonly ({ name: QueueName } & Parameters<PgBoss["createQueue"]>[1])[];

/** Settings of single queues in place of the ones above; a policy cannot be changed. */
export type QueueSettings = Partial<Record<QueueName, Omit<NonNullable<Parameters<PgBoss["updateQueue"]>[1]>, "name">>>;

/** Makes the queues that are missing and brings the settings of the others up to date. @throws when one has another policy, which cannot be changed. */
export async function createQueues(boss: PgBoss, instead: QueueSettings = {}): Promise<void> {
  for (const { name, policy, ...given } of QUEUES) {
    const settings = { ...given, ...instead[name] };
    await boss.createQueue(name, { policy, ...given });
    const stored = await boss.getQueue(name);
    if (stored?.policy !== policy) throw new Error(`queue ${name} has the policy ${stored?.policy}, it needs ${policy}`);
    await boss.updateQueue(name, settings);
  }
}

/** Sends a job; equal keys are one job while it waits or runs. */
export async function send<Name extends QueueName>(
  boss: PgBoss,
  name: Name,
  data: Payload<Name>,
  { key, startAfter }: { key: string; startAfter?: Date },
): Promise<void> {
  await boss.send(name, payloads[name].parse(data), { singletonKey: key, ...(startAfter ? { startAfter } : {}) });
}
