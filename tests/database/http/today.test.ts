import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { GET } from "@/app/api/today/route";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { acknowledgeAlarm } from "@/lib/alarms/acknowledge";
import { shelveAlarm } from "@/lib/alarms/shelve";
import { holdCampaign } from "@/lib/campaigns/hold";
import { inTransaction, sequelize } from "@/lib/db";
import type { TodayAnswer } from "@/lib/today/schema";
import { OperatorTask } from "@/models/operator-task";
import { Bench } from "../../factories/bench";
import { buildCampaign } from "../../factories/campaign";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";
import { at, request, signedInAs } from "../../factories/session";

let cookie: string;
beforeAll(async () => {
  vi.useFakeTimers({ toFake: ["Date"], now: now.getTime() + 60_000 });
  ({ cookie } = await signedInAs("viewer"));
});
afterAll(async () => {
  vi.useRealTimers();
  await sequelize.close();
});

async function today(): Promise<TodayAnswer> {
  const response = await GET(request("GET", "/api/today", { cookie }), at());
  expect(response.status).toBe(200);
  return (await response.json()) as TodayAnswer;
}
const rigOf = async (id: string) => (await today()).rigs.find((rig) => rig.id === id);

const alarm = (rigId: string, kind: string) => inTransaction((transaction) => openAlarm(transaction, { now, rigId, source: "system", kind, text: kind, actionText: "Measuring goes on.", mail: false }));

test("an empty laboratory has nothing to show, and says so with lists", async () => {
  expect(await today()).toMatchObject({ rigs: [], alarms: [], tasks: [], moreTasks: false, log: { items: [] } });
});

test("a rig tells what it measures, how far it is and what follows; a retired one is left out", async () => {
  const bench = await Bench.make({ clock: "real" });
  await bench.hello();
  const step = await bench.run(({ kind, role }) => kind === "measure" && role !== "find");
  if (!step) throw new Error("no measure step came");
  await bench.upload(step, [0, 1, 2]);
  const { id: nextId } = await buildCampaign({ rigId: bench.rig.id, state: "queued", name: "The next" });
  const retired = await buildRig({ retiredAt: now });
  expect(await rigOf(bench.rig.id)).toMatchObject({ campaign: { id: bench.campaign.id, state: "running" }, doing: "Air, repeat 3 of 10", next: { id: nextId, name: "The next" }, haltedAt: null, silent: false });
  expect(await rigOf(retired.id)).toBeUndefined();

  await holdCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, now });
  expect(await rigOf(bench.rig.id)).toMatchObject({ campaign: { state: "held" }, doing: null, haltedAt: null });
});

test("a running rig that was last heard too long ago is silent, an idle one is not", async () => {
  const running = await buildRig({ lastContactAt: hours(-1) });
  await buildCampaign({ rigId: running.id, state: "running" });
  const idle = await buildRig({ lastContactAt: hours(-1) });
  expect((await rigOf(running.id))?.silent).toBe(true);
  expect((await rigOf(idle.id))?.silent).toBe(false);
});

test("alarms that nobody has come first, then those that somebody has, then the shelved", async () => {
  const by = await actor("operator");
  const rig = await buildRig();
  const [shelved, taken, fresh] = [await alarm(rig.id, "clock"), await alarm(rig.id, "silence"), await alarm(rig.id, "pump")];
  await shelveAlarm({ by, alarmId: shelved.alarmId, until: hours(3), now });
  await acknowledgeAlarm({ by, alarmId: taken.alarmId, now });
  const ids = (await today()).alarms.filter(({ rigId }) => rigId === rig.id).map(({ id }) => id);
  expect(ids).toEqual([fresh.alarmId, taken.alarmId, shelved.alarmId]);
});

test("open tasks stand by when they are due, fifty at most, and whether there are more is said", async () => {
  const rig = await buildRig();
  const task = (dueAt: Date) => ({ rigId: rig.id, kind: "other" as const, instruction: "Look", state: "open" as const, createdAt: now, dueAt });
  await OperatorTask.bulkCreate([task(hours(5)), task(hours(1))]);
  await OperatorTask.create({ ...task(hours(0)), state: "withdrawn" });
  const few = await today();
  expect(few.tasks.map(({ dueAt }) => dueAt)).toEqual([hours(1).toISOString(), hours(5).toISOString()]);
  expect(few.moreTasks).toBe(false);
  await OperatorTask.bulkCreate(Array.from({ length: 49 }, () => task(hours(2))));
  const many = await today();
  expect([many.tasks.length, many.moreTasks]).toEqual([50, true]);
});

test("the log begins with the evening before", async () => {
  const { log, laboratory } = await today();
  expect(laboratory.timeZone).toEqual(expect.any(String));
  expect(new Date(log.since).getTime()).toBeLessThan(now.getTime() - 6 * 3_600_000);
  expect(log.items.every(({ at: time }) => time >= log.since)).toBe(true);
  expect(log.items.length).toBeGreaterThan(0);
});
