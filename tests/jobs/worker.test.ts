import { fork } from "node:child_process";
import path from "node:path";
import { PgBoss } from "pg-boss";
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { createQueues, send } from "@/jobs/queues";
import { startWorker } from "@/jobs/start-worker";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { change, inTransaction, row, rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { Notification } from "@/models/notification";
import { now } from "@/tests/factories/now";
import { buildPerson } from "@/tests/factories/person";
import { buildRig } from "@/tests/factories/rig";
import { testDatabase } from "@/tests/setup/database";
import { MailServer } from "./mail-server";
import { waitUntil } from "./wait-until";

const DAY_MS = 86_400_000;
const quickly = { superviseIntervalSeconds: 1, settings: { mail: { retryLimit: 20, retryDelay: 1, retryDelayMax: 1 } } };

let mail: MailServer;
const running: (() => Promise<void>)[] = [];

beforeAll(async () => {
  mail = await MailServer.onFreePorts();
  process.env.SMTP_URL = `smtp://127.0.0.1:${mail.smtpPort}`;
});
beforeEach(async () => {
  await change("delete from notification");
  await change("delete from person");
});
afterEach(async () => {
  for (const end of running.splice(0)) await end();
  await change("delete from alarm_event");
  await change("delete from notification");
  await change("delete from alarm");
});
afterAll(async () => {
  await mail.stop();
  await listener().close();
  await sequelize.close();
});

const work = async (options: Parameters<typeof startWorker>[0] = quickly) => {
  running.push(await startWorker(options));
};

async function queue(): Promise<PgBoss> {
  const boss = new PgBoss({ connectionString: testDatabase().url, supervise: false, schedule: false, max: 2 });
  boss.on("error", () => undefined);
  await boss.start();
  running.push(() => boss.stop({ graceful: false }));
  return boss;
}

/** Opened at the present: one from long ago that nobody has would be told of once more by the sweep. */
async function alarmWithMail(people = 1): Promise<string> {
  const rig = await buildRig();
  for (let i = 0; i < people; i++) await buildPerson({ role: "operator" });
  const { alarmId } = await inTransaction((transaction) =>
    openAlarm(transaction, { now: new Date(), rigId: rig.id, source: "system", kind: "clock", text: `${rig.name}: the clock is off`, actionText: "Measuring goes on.", mail: true }),
  );
  return alarmId;
}
const stateOf = async (alarmId: string) => (await Notification.findAll({ where: { alarmId } })).map(({ state }) => state);
const allSent = (alarmId: string) => async () => (await stateOf(alarmId)).every((state) => state === "sent");
const about = async (alarmId: string) => (await mail.received()).filter(({ text }) => text.includes(`/alarms/${alarmId}`));

describe("while no mail server answers", () => {
  test("a mail is tried again until one does, and arrives once", async () => {
    const alarmId = await alarmWithMail();
    await work();
    await waitUntil("a failed try", async () => (await row(`select 1 as yes from notification where tries >= 2 and error is not null`)) !== undefined, 45_000);
    expect(await stateOf(alarmId)).toEqual(["waiting"]);
    await mail.start();
    await waitUntil("delivery", allSent(alarmId));
    expect(await about(alarmId)).toHaveLength(1);
  }, 90_000);
});

describe("with a mail server", () => {
  test("what an alarm's transaction wrote is delivered; what was rolled back is not", async () => {
    await work();
    const rig = await buildRig();
    await buildPerson({ role: "operator" });
    const undone = inTransaction(async (transaction) => {
      await openAlarm(transaction, { now, rigId: rig.id, source: "system", kind: "clock", text: `${rig.name}: undone`, actionText: "Nothing.", mail: true });
      throw new Error("rolled back");
    });
    await expect(undone).rejects.toThrow("rolled back");
    const alarmId = await alarmWithMail();
    await waitUntil("delivery", allSent(alarmId));
    expect((await mail.received()).filter(({ text }) => text.includes("undone"))).toEqual([]);
  });

  test("two workers send nothing twice", async () => {
    const alarmId = await alarmWithMail(8);
    await Promise.all([work(), work()]);
    await waitUntil("delivery", allSent(alarmId));
    const received = await about(alarmId);
    expect(received).toHaveLength(8);
    expect(new Set(received.map(({ to }) => to[0].address)).size).toBe(8);
  });

  test("after the last try a mail is a dead letter, and stays readable", async () => {
    const alarmId = await alarmWithMail();
    await change(`update notification set address = 'not an address'`);
    await work({ superviseIntervalSeconds: 1, settings: { mail: { retryLimit: 1, retryDelay: 1, retryDelayMax: 1 } } });
    await waitUntil("the dead letter", async () => (await stateOf(alarmId))[0] === "failed");
    expect(await Notification.findOne({ where: { alarmId } })).toMatchObject({ tries: 2, error: expect.any(String) });
  });
});

describe("queues", () => {
  test("one with another policy is refused at start, as it cannot be changed", async () => {
    const boss = await queue();
    await createQueues(boss);
    await change(`update pgboss.queue set policy = 'standard' where name = 'mail'`);
    await expect(createQueues(boss)).rejects.toThrow("queue mail has the policy standard, it needs exclusive");
    await change(`update pgboss.queue set policy = 'exclusive' where name = 'mail'`);
  });

  test("equal keys are one job", async () => {
    const boss = await queue();
    await createQueues(boss);
    for (let i = 0; i < 3; i++) await send(boss, "advance", { campaignId: "1" }, { key: "1:soon", startAfter: new Date(Date.now() + DAY_MS) });
    expect(await rows(`select id from pgboss.job where name = 'advance' and singleton_key = '1:soon'`)).toHaveLength(1);
  });

  test("a start in 90 days outlives retention and maintenance", async () => {
    const boss = await queue();
    await createQueues(boss);
    const startAfter = new Date(Date.now() + 90 * DAY_MS);
    await send(boss, "advance", { campaignId: "7" }, { key: "7:far", startAfter });
    const jobOf = () => row<{ keepUntil: Date; state: string }>(`select keep_until as "keepUntil", state from pgboss.job where name = 'advance' and singleton_key = '7:far'`);
    expect((await jobOf())?.keepUntil.getTime()).toBeGreaterThan(startAfter.getTime() + 29 * DAY_MS);
    await boss.supervise();
    expect((await jobOf())?.state).toBe("created");
  });
});

test("a job whose worker was killed runs again", async () => {
  const boss = await queue();
  await createQueues(boss, { mail: { heartbeatSeconds: 10 } });
  const alarmId = await alarmWithMail();
  const { id } = (await Notification.findOne({ where: { alarmId }, rejectOnEmpty: true })) as Notification;
  await send(boss, "mail", { notificationId: id }, { key: id });
  const child = fork(path.resolve(import.meta.dirname, "hangs-on-a-job.mjs"), { stdio: ["ignore", "ignore", "inherit", "ipc"] });
  await new Promise((resolve) => child.once("message", resolve));
  expect(await row(`select state from pgboss.job where name = 'mail' and state = 'active'`)).toBeDefined();
  child.kill("SIGKILL");
  await work({ superviseIntervalSeconds: 1, settings: { mail: { heartbeatSeconds: 10, retryDelay: 1, retryDelayMax: 1 } } });
  await waitUntil("delivery", allSent(alarmId), 60_000);
  expect(await about(alarmId)).toHaveLength(1);
}, 90_000);
