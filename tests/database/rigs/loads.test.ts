import { afterAll, describe, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { openTask } from "@/lib/tasks/open-task";
import { emptyWaste } from "@/lib/rigs/empty-waste";
import { findLoads } from "@/lib/rigs/loads";
import { recordLoad } from "@/lib/rigs/record-load";
import { CampaignEvent } from "@/models/campaign-event";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";
import { Hold } from "@/models/hold";
import { Lot } from "@/models/lot";
import { OperatorTask } from "@/models/operator-task";
import { Port } from "@/models/port";
import { Rig } from "@/models/rig";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { buildLoad } from "../../factories/load";
import { buildLot } from "../../factories/lot";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

const portOf = (rigId: string, number = 1) => Port.findOne({ where: { rigId, number }, rejectOnEmpty: true });

describe("recordLoad", () => {
  test("a new bottle takes the place of the one before; what was left of that is gone", async () => {
    const by = await actor("operator");
    const rig = await buildRig();
    await buildLoad({ rigId: rig.id, volumeMl: 400 });
    const lot = await buildLot();
    const { id } = await recordLoad({ by, now, rigId: rig.id, port: 1, lotId: lot.id, volumeMl: 950, how: "replace" });
    expect(await portOf(rig.id)).toMatchObject({ loadId: id, remainingMl: 950 });
    expect(await auditedActions("rig", rig.id)).toEqual(["load"]);
    expect((await findLoads({ rigId: rig.id, limit: 1 })).items).toEqual([expect.objectContaining({ id, lotCode: lot.code, loadedBy: by.name })]);
  });

  test("a top up adds to what is left, with the same lot only", async () => {
    const by = await actor("operator");
    const load = await buildLoad({ volumeMl: 400 });
    const { rigId, lotId } = load;
    await recordLoad({ by, now, rigId, port: 1, lotId, volumeMl: 100, how: "topUp" });
    expect(await portOf(rigId)).toMatchObject({ remainingMl: 500 });
    const other = await buildLot({ liquidId: (await Lot.findByPk(lotId))!.liquidId });
    await expect(recordLoad({ by, now, rigId, port: 1, lotId: other.id, volumeMl: 100, how: "topUp" })).rejects.toMatchObject({ status: 422 });
    expect(await portOf(rigId)).toMatchObject({ remainingMl: 500 });
  });

  test("there is nothing to top up on an empty port", async () => {
    const rig = await buildRig();
    const lot = await buildLot();
    await expect(recordLoad({ by: await actor("operator"), now, rigId: rig.id, port: 1, lotId: lot.id, volumeMl: 100, how: "topUp" })).rejects.toMatchObject({ status: 422 });
  });

  test.each([
    ["a port that the rig has not", { port: 9 }],
    ["a lot that does not exist", { lotId: "999999" }],
  ])("%s is 422", async (_, wrong) => {
    const rig = await buildRig();
    const lot = await buildLot();
    const load = { by: await actor("operator"), now, rigId: rig.id, port: 1, lotId: lot.id, volumeMl: 100, how: "replace" as const };
    await expect(recordLoad({ ...load, ...wrong })).rejects.toMatchObject({ status: 422 });
  });

  test("a viewer records nothing", async () => {
    const by = await actor("viewer");
    await expect(recordLoad({ by, now, rigId: "1", port: 1, lotId: "1", volumeMl: 1, how: "replace" })).rejects.toMatchObject({ status: 403 });
  });

  test("another liquid than the running campaign draws from the port is refused", async () => {
    const campaign = await buildCampaign({ state: "running" });
    const other = await buildLot();
    const load = { by: await actor("operator"), now, rigId: campaign.rigId!, port: 1, lotId: other.id, volumeMl: 500, how: "replace" as const };
    await expect(recordLoad({ ...load, confirm: true })).rejects.toMatchObject({ status: 422, code: "other-liquid" });
    await expect(recordLoad({ ...load, port: 2 })).resolves.toHaveProperty("id");
  });

  test("another lot of the same liquid in mid-campaign needs a yes, and stands in the campaign's log", async () => {
    const campaign = await buildCampaign({ state: "held" });
    const other = await sameLiquid(campaign);
    const load = { by: await actor("operator"), now, rigId: campaign.rigId!, port: 1, lotId: other.id, volumeMl: 500, how: "replace" as const };
    await expect(recordLoad(load)).rejects.toMatchObject({ status: 409, code: "other-lot" });
    expect(await CampaignEvent.count({ where: { campaignId: campaign.id } })).toBe(0);

    await recordLoad({ ...load, confirm: true });
    const [event] = await CampaignEvent.findAll({ where: { campaignId: campaign.id, kind: "otherLot" } });
    expect(event.text).toContain(other.code);
    await expect(recordLoad(load), "the lot that now stands there is no other lot").resolves.toHaveProperty("id");
  });

  test("a queued campaign does not stand in the way of another lot", async () => {
    const campaign = await buildCampaign({ state: "queued" });
    const other = await sameLiquid(campaign);
    await expect(
      recordLoad({ by: await actor("operator"), now, rigId: campaign.rigId!, port: 1, lotId: other.id, volumeMl: 500, how: "replace" }),
    ).resolves.toHaveProperty("id");
  });

  test("loading the port answers the task that asked for it and ends the hold that waited", async () => {
    const by = await actor("operator");
    const { campaign, taskId } = await waitingFor("load", 1);
    const elsewhere = await sequelize.transaction((t) => openTask(t, { rigId: campaign.rigId!, kind: "load", port: 2, instruction: "Port 2", now }));
    const slot = await CampaignSlot.findOne({ where: { campaignId: campaign.id }, rejectOnEmpty: true });
    await recordLoad({ by, now, rigId: campaign.rigId!, port: 1, lotId: slot.lotId, volumeMl: 500, how: "replace" });
    expect(await OperatorTask.findByPk(taskId)).toMatchObject({ state: "answered", answer: "done", answeredBy: by.id });
    expect(await OperatorTask.findByPk(elsewhere)).toMatchObject({ state: "open" });
    expect(await auditedActions("task", taskId)).toEqual(["answer"]);
    expect((await campaign.reload()).state).toBe("running");
  });
});

describe("emptyWaste", () => {
  test("empties the container and answers the task that asked for it", async () => {
    const by = await actor("operator");
    const { campaign, taskId } = await waitingFor("waste");
    await Rig.update({ wasteMl: 4800 }, { where: { id: campaign.rigId! } });
    await emptyWaste({ by, now, rigId: campaign.rigId! });
    expect(await Rig.findByPk(campaign.rigId!)).toMatchObject({ wasteMl: 0 });
    expect(await OperatorTask.findByPk(taskId)).toMatchObject({ state: "answered" });
    expect((await campaign.reload()).state).toBe("running");
    expect(await auditedActions("rig", campaign.rigId!)).toEqual(["empty waste"]);
  });

  test("is refused to a viewer", async () => {
    const by = await actor("viewer");
    await expect(emptyWaste({ by, now, rigId: "1" })).rejects.toMatchObject({ status: 403 });
  });
});

async function sameLiquid(campaign: Campaign): Promise<Lot> {
  const slot = await CampaignSlot.findOne({ where: { campaignId: campaign.id }, rejectOnEmpty: true });
  const lot = await Lot.findByPk(slot.lotId, { rejectOnEmpty: true });
  return buildLot({ liquidId: lot.liquidId });
}

async function waitingFor(kind: "load" | "waste", port?: number): Promise<{ campaign: Campaign; taskId: string }> {
  const campaign = await buildCampaign({ state: "held" });
  const hold = await Hold.create({ campaignId: campaign.id, reason: "task", text: "waits", openedAt: now });
  const taskId = await sequelize.transaction((t) =>
    openTask(t, { rigId: campaign.rigId!, campaignId: campaign.id, holdId: hold.id, kind, port, instruction: "Do it", now }),
  );
  return { campaign, taskId };
}
