import { describe, expect, test } from "vitest";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { stopCampaign } from "@/lib/campaigns/stop";
import { answerTask } from "@/lib/tasks/answer";
import { findTasks, getTask } from "@/lib/tasks/read";
import { taskQuery } from "@/lib/tasks/schema";
import { Alarm } from "@/models/alarm";
import { Hold } from "@/models/hold";
import { Mount } from "@/models/mount";
import { Notification } from "@/models/notification";
import { OperatorTask } from "@/models/operator-task";
import { auditedActions } from "@/tests/factories/audit";
import { Bench } from "@/tests/factories/bench";
import { buildMount } from "@/tests/factories/mount";
import { hours } from "@/tests/factories/now";
import { actor, buildPerson } from "@/tests/factories/person";
import { buildRig } from "@/tests/factories/rig";

const openTaskOf = async (bench: Bench) => OperatorTask.findOne({ where: { campaignId: bench.campaign.id, state: "open" }, rejectOnEmpty: true });

/** A campaign that waits because a port ran empty during its fill. */
async function waitingForBottle() {
  const bench = await Bench.make();
  await bench.hello();
  const fill = await bench.run(({ kind }) => kind === "fill");
  if (!fill) throw new Error("no fill came");
  await bench.finish(fill, { outcome: "failed", failure: { code: "port-empty", message: "bubble", retry: true } });
  return { bench, fill, task: await openTaskOf(bench) };
}

describe("done", () => {
  test("releases the hold that waited for it, and the same step goes out again", async () => {
    const by = await actor("operator");
    const { bench, fill, task } = await waitingForBottle();
    expect(await answerTask({ by, taskId: task.id, answer: "done", note: "new bottle", now: bench.now })).toMatchObject({ state: "answered", answer: "done", answeredBy: by.name, note: "new bottle", holds: false });
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("running");
    expect((await bench.next())?.id).toBe(fill.id);
    expect(await auditedActions("task", task.id)).toEqual(["answer"]);
  });

  test("the same answer again is a success and changes nothing", async () => {
    const [first, second] = [await actor("operator"), await actor("operator")];
    const { bench, task } = await waitingForBottle();
    await answerTask({ by: first, taskId: task.id, answer: "done", now: bench.now });
    expect(await answerTask({ by: second, taskId: task.id, answer: "done", now: bench.now })).toMatchObject({ answeredBy: first.name });
    expect(await auditedActions("task", task.id)).toEqual(["answer"]);
  });

  test("a different answer is refused with who was first and when", async () => {
    const by = await actor("operator");
    const { bench, task } = await waitingForBottle();
    await answerTask({ by, taskId: task.id, answer: "done", now: bench.now });
    await expect(answerTask({ by: await actor("researcher"), taskId: task.id, answer: "cannot", now: bench.now })).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(new RegExp(`^${by.name} answered “done” on Thu 14 May 2026 \\d\\d:\\d\\d`)),
    });
  });

  test("two different answers at once: one stands", async () => {
    const { bench, task } = await waitingForBottle();
    const people = [await actor("operator"), await actor("operator")];
    const said = await Promise.allSettled(people.map((by, i) => answerTask({ by, taskId: task.id, answer: i === 0 ? "done" : "cannot", now: bench.now })));
    expect(said.map(({ status }) => status).toSorted()).toEqual(["fulfilled", "rejected"]);
    expect(await auditedActions("task", task.id)).toHaveLength(1);
  });

  test("a mount task only once the sensor is mounted", async () => {
    const bench = await Bench.make();
    await Mount.destroy({ where: { sensorId: bench.campaign.sensorId as string } });
    await bench.hello();
    await bench.work();
    const task = await openTaskOf(bench);
    expect(task.kind).toBe("mount");
    const by = await actor("operator");
    await expect(answerTask({ by, taskId: task.id, answer: "done", now: bench.now })).rejects.toMatchObject({ status: 422, message: expect.stringContaining("not mounted") });
    expect((await getTask(task.id)).state).toBe("open");
    await buildMount({ sensorId: bench.campaign.sensorId as string, rigId: bench.rig.id });
    expect((await answerTask({ by, taskId: task.id, answer: "done", now: bench.now })).state).toBe("answered");
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("running");
  });
});

describe("cannot", () => {
  test("keeps the hold and opens an alarm that is mailed; a person lets the campaign go on", async () => {
    await buildPerson({ role: "operator" });
    const by = await actor("operator");
    const { bench, fill, task } = await waitingForBottle();
    await answerTask({ by, taskId: task.id, answer: "cannot", note: "no lot in the store", now: bench.now });
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("held");
    expect(await Hold.count({ where: { campaignId: bench.campaign.id, reason: "task", releasedAt: null } })).toBe(1);
    const alarm = await Alarm.findOne({ where: { campaignId: bench.campaign.id }, rejectOnEmpty: true });
    expect(alarm).toMatchObject({ source: "system", state: "unacknowledged", text: expect.stringContaining("no lot in the store") });
    expect(await Notification.count({ where: { alarmId: alarm.id } })).toBeGreaterThan(0);

    expect(await resumeCampaign({ by, campaignId: bench.campaign.id, from: "here", now: bench.now })).toMatchObject({ state: "running" });
    expect((await bench.next())?.id).toBe(fill.id);
  });

  test("while a task is open, resume is refused", async () => {
    const { bench } = await waitingForBottle();
    await expect(resumeCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, from: "here", now: bench.now })).rejects.toMatchObject({ status: 409 });
  });
});

test("a task withdrawn with its campaign is gone", async () => {
  const { bench, task } = await waitingForBottle();
  await stopCampaign({ by: await actor("researcher"), campaignId: bench.campaign.id, why: "enough", now: bench.now });
  await expect(answerTask({ by: await actor("operator"), taskId: task.id, answer: "done", now: bench.now })).rejects.toMatchObject({ status: 410 });
});

test("a viewer may not answer, and what does not exist is 404", async () => {
  const { bench, task } = await waitingForBottle();
  await expect(answerTask({ by: await actor("viewer"), taskId: task.id, answer: "done", now: bench.now })).rejects.toMatchObject({ status: 403 });
  await expect(answerTask({ by: await actor("operator"), taskId: "999999", answer: "done", now: bench.now })).rejects.toMatchObject({ status: 404 });
});

test("a task that cannot wait is mailed to those who do tasks, in its own transaction", async () => {
  const operator = await buildPerson({ role: "operator" });
  const viewer = await buildPerson({ role: "viewer" });
  const { task } = await waitingForBottle();
  const mails = await Notification.findAll({ where: { operatorTaskId: task.id } });
  expect(mails.map(({ address }) => address)).toContain(operator.email);
  expect(mails.map(({ address }) => address)).not.toContain(viewer.email);
  expect(mails[0].bodyText).toContain("The campaign waits until it is done.");
  expect(mails[0].subject).toMatch(/^Rig \d+ waits: load port 1$/);
});

test("tasks come by when they are due, one without a time as of when it was made", async () => {
  const rig = await buildRig();
  const make = (instruction: string, createdAt: Date, dueAt?: Date) => OperatorTask.create({ rigId: rig.id, kind: "other", instruction, state: "open", createdAt, dueAt });
  await make("late", hours(0), hours(9));
  await make("now", hours(2));
  await make("soon", hours(1), hours(3));
  const find = (query: Record<string, unknown>) => findTasks(taskQuery.parse({ rigId: rig.id, ...query }));
  const first = await find({ limit: 2 });
  expect(first.items.map(({ instruction }) => instruction)).toEqual(["now", "soon"]);
  expect((await find({ limit: 2, cursor: first.nextCursor })).items.map(({ instruction }) => instruction)).toEqual(["late"]);
});
