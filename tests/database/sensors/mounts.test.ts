import { afterAll, describe, expect, test } from "vitest";
import { constraintOf } from "@/lib/conflicts";
import { change, rows, sequelize } from "@/lib/db";
import { endMount } from "@/lib/mounts/end-mount";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import { findMounts, getMount } from "@/lib/mounts/read";
import { openTask } from "@/lib/tasks/open-task";
import { Hold } from "@/models/hold";
import { OperatorTask } from "@/models/operator-task";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { buildMount } from "../../factories/mount";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";

afterAll(() => sequelize.close());

describe("mountSensor", () => {
  test("mounts a free sensor, and says who did", async () => {
    const by = await actor("operator");
    const [sensor, rig] = [await buildSensor(), await buildRig()];
    const { id } = await mountSensor({ by, now, sensorId: sensor.id, rigId: rig.id, note: "torque 0.4 N·m" });
    expect(await getMount(id)).toMatchObject({ serial: sensor.serial, rigName: rig.name, position: 1, from: now.toISOString(), to: null, mountedBy: by.name });
    expect(await auditedActions("sensor", sensor.id)).toEqual(["mount"]);
  });

  test("mounting elsewhere ends the old mount and holds the campaign that used it, with a task", async () => {
    const by = await actor("operator");
    const campaign = await buildCampaign({ state: "running" });
    const old = await buildMount({ sensorId: campaign.sensorId!, rigId: campaign.rigId!, from: hours(-5) });
    await mountSensor({ by, now, sensorId: campaign.sensorId!, rigId: (await buildRig()).id });
    expect((await getMount(old.id)).to).toBe(now.toISOString());
    expect((await campaign.reload()).state).toBe("held");
    const [hold] = await Hold.findAll({ where: { campaignId: campaign.id } });
    expect(hold).toMatchObject({ reason: "task", releasedAt: null });
    expect(await OperatorTask.findAll({ where: { campaignId: campaign.id } })).toEqual([
      expect.objectContaining({ kind: "mount", rigId: campaign.rigId, holdId: hold.id, state: "open" }),
    ]);
  });

  test("mounting it on its rig again answers that task, ends the hold and wakes dispatch", async () => {
    const by = await actor("operator");
    const campaign = await buildCampaign({ state: "running" });
    const { sensorId, rigId } = campaign;
    await buildMount({ sensorId: sensorId!, rigId: rigId!, from: hours(-5) });
    await mountSensor({ by, now, sensorId: sensorId!, rigId: (await buildRig()).id });
    await mountSensor({ by, now: hours(1), sensorId: sensorId!, rigId: rigId! });
    expect(await OperatorTask.findOne({ where: { campaignId: campaign.id } })).toMatchObject({ state: "answered", answer: "done", answeredBy: by.id });
    expect(await campaign.reload()).toMatchObject({ state: "running", needsAdvance: true });
  });

  test("a mount task for another sensor on the rig stays open", async () => {
    const campaign = await buildCampaign({ state: "held" });
    const taskId = await sequelize.transaction((t) => openTask(t, { rigId: campaign.rigId!, campaignId: campaign.id, kind: "mount", instruction: "Mount", now }));
    await mountSensor({ by: await actor("operator"), now, sensorId: (await buildSensor()).id, rigId: campaign.rigId!, position: 2 });
    expect(await OperatorTask.findByPk(taskId)).toMatchObject({ state: "open" });
  });

  test("clamping it anew on its rig is a new mount and holds nothing", async () => {
    const campaign = await buildCampaign({ state: "running" });
    const old = await buildMount({ sensorId: campaign.sensorId!, rigId: campaign.rigId!, from: hours(-5) });
    const { id } = await mountSensor({ by: await actor("operator"), now, sensorId: campaign.sensorId!, rigId: campaign.rigId! });
    expect(id).not.toBe(old.id);
    expect(await campaign.reload()).toMatchObject({ state: "running", needsAdvance: true });
  });

  test("a position that another sensor has is refused, by name", async () => {
    const taken = await buildMount();
    const attempt = mountSensor({ by: await actor("operator"), now, sensorId: (await buildSensor()).id, rigId: taken.rigId });
    await expect(attempt).rejects.toMatchObject({ status: 409, code: "position-taken" });
  });

  test("a time at which the position was still taken is refused by the database", async () => {
    const past = await buildMount({ from: hours(-10), to: hours(-2) });
    const attempt = mountSensor({ by: await actor("operator"), now, sensorId: (await buildSensor()).id, rigId: past.rigId, mountedAt: hours(-4) });
    await expect(attempt).rejects.toMatchObject({ status: 409, code: "mount-overlap" });
  });

  test.each([
    ["in the future", { mountedAt: hours(1) }, 422],
    ["before its present mount began", { mountedAt: hours(-6) }, 409],
  ])("a mount %s is refused", async (_, when, status) => {
    const mount = await buildMount({ from: hours(-5) });
    const attempt = mountSensor({ by: await actor("operator"), now, sensorId: mount.sensorId, rigId: (await buildRig()).id, ...when });
    await expect(attempt).rejects.toMatchObject({ status });
    expect((await getMount(mount.id)).to).toBeNull();
  });

  test("a viewer mounts nothing; a retired sensor is mounted nowhere", async () => {
    const rig = await buildRig();
    await expect(mountSensor({ by: await actor("viewer"), now, sensorId: (await buildSensor()).id, rigId: rig.id })).rejects.toMatchObject({ status: 403 });
    const retired = await buildSensor({ retiredAt: now });
    await expect(mountSensor({ by: await actor("operator"), now, sensorId: retired.id, rigId: rig.id })).rejects.toMatchObject({ status: 409 });
  });
});

describe("endMount", () => {
  test("ends it once and holds the campaign that used it", async () => {
    const by = await actor("operator");
    const campaign = await buildCampaign({ state: "running" });
    const mount = await buildMount({ sensorId: campaign.sensorId!, rigId: campaign.rigId!, from: hours(-5) });
    await endMount({ by, now, mountId: mount.id });
    expect(await getMount(mount.id)).toMatchObject({ to: now.toISOString(), endedBy: by.name });
    expect((await campaign.reload()).state).toBe("held");
    await expect(endMount({ by, now, mountId: mount.id })).rejects.toMatchObject({ status: 409 });
    expect(await auditedActions("sensor", campaign.sensorId!)).toEqual(["end mount"]);
  });

  test("does not end before it began", async () => {
    const mount = await buildMount();
    await expect(endMount({ by: await actor("operator"), now, mountId: mount.id, endedAt: hours(-1) })).rejects.toMatchObject({ status: 422 });
  });
});

describe("the database itself", () => {
  const insert = (sensorId: string, rigId: string, position: number) =>
    change("insert into mount (sensor_id, rig_id, position, period, created_at) values ($1, $2, $3, tstzrange($4, null, '[)'), $4)", [sensorId, rigId, position, now]);

  const breaks = (constraint: string) => (error: unknown) => constraintOf(error) === constraint;

  test("refuses a sensor in two places at once", async () => {
    const mount = await buildMount();
    await expect(insert(mount.sensorId, (await buildRig()).id, 1)).rejects.toSatisfy(breaks("mount_sensor_id_period_excl"));
  });

  test("refuses two sensors in one position at once", async () => {
    const mount = await buildMount();
    await expect(insert((await buildSensor()).id, mount.rigId, 1)).rejects.toSatisfy(breaks("mount_rig_id_position_period_excl"));
    await expect(insert((await buildSensor()).id, mount.rigId, 2)).resolves.toBe(1);
  });

  test("two people who mount the same sensor at the same moment leave one open mount", async () => {
    const sensor = await buildSensor();
    const by = await actor("operator");
    const rigs = [await buildRig(), await buildRig()];
    await Promise.allSettled(rigs.map((rig, index) => mountSensor({ by, now: hours(index), sensorId: sensor.id, rigId: rig.id })));
    const open = await rows("select id from mount where sensor_id = $1 and upper_inf(period)", [sensor.id]);
    expect(open).toHaveLength(1);
  });
});

test("mounts of a sensor are listed newest first, page by page", async () => {
  const sensor = await buildSensor();
  for (const h of [-9, -6, -3]) await buildMount({ sensorId: sensor.id, from: hours(h), to: hours(h + 2) });
  const first = await findMounts({ sensorId: sensor.id, limit: 2 });
  const second = await findMounts({ sensorId: sensor.id, limit: 2, cursor: first.nextCursor! });
  expect([...first.items, ...second.items].map(({ from }) => from)).toEqual([-3, -6, -9].map((h) => hours(h).toISOString()));
  expect(second.nextCursor).toBeNull();
});
