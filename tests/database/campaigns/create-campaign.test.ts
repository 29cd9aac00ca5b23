import { afterAll, describe, expect, test } from "vitest";
import { changeCampaign, deleteDraft } from "@/lib/campaigns/change-draft";
import { checkCampaign } from "@/lib/campaigns/check";
import { createCampaign } from "@/lib/campaigns/create";
import { change, sequelize } from "@/lib/db";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { buildLot } from "../../factories/lot";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildProtocol, buildProtocolVersion } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";

afterAll(() => sequelize.close());

async function given() {
  const [version, sensor, rig, lot] = [await buildProtocolVersion(), await buildSensor(), await buildRig({ ports: 2 }), await buildLot()];
  return { protocolVersionId: version.id, sensorId: sensor.id, rigId: rig.id, slots: { sample: { port: 1, lotId: lot.id } } };
}

describe("createCampaign", () => {
  test("makes a draft under a name of its own, with its slots", async () => {
    const by = await actor("researcher");
    const { id, name } = await createCampaign({ by, now, ...(await given()), startAt: hours(90 * 24), priority: 5 });
    const campaign = await Campaign.findByPk(id, { rejectOnEmpty: true });
    expect(campaign).toMatchObject({ state: "draft", startAt: hours(90 * 24), priority: 5, createdBy: by.id, name });
    expect(await CampaignSlot.count({ where: { campaignId: id } })).toBe(1);
    expect(await auditedActions("campaign", id)).toEqual(["create"]);
  });

  test.each(["viewer", "operator"] as const)("is refused to a %s", async (role) => {
    await expect(createCampaign({ by: await actor(role), now, ...(await given()) })).rejects.toMatchObject({ status: 403 });
  });

  const lotId = "999999";
  test.each([
    ["a slot that is not bound", { slots: {} }, "slots.sample"],
    ["a slot that the protocol has not", { slots: { other: { port: 1, lotId } } }, "slots.other"],
    ["a port that the rig has not", { slots: { sample: { port: 3, lotId } } }, "slots.sample.port"],
    ["a lot that does not exist", { slots: { sample: { port: 1, lotId } } }, "slots.sample.lotId"],
    ["a sensor that does not exist", { sensorId: lotId }, "sensorId"],
    ["a version that does not exist", { protocolVersionId: lotId }, "protocolVersionId"],
    ["a rig that does not exist", { rigId: lotId }, "rigId"],
  ])("%s is 422 and named", async (_, wrong, path) => {
    const attempt = createCampaign({ by: await actor("researcher"), now, ...(await given()), ...wrong });
    await expect(attempt).rejects.toMatchObject({ status: 422, members: { errors: expect.arrayContaining([expect.objectContaining({ path })]) } });
  });

  test("a name of Object's own is no slot that was bound", async () => {
    const { definition } = await buildProtocolVersion();
    const text = JSON.stringify(definition).replaceAll('"sample"', '"constructor"').replaceAll('"role":"constructor"', '"role":"sample"');
    const version = await buildProtocolVersion({ definition: JSON.parse(text) });
    const attempt = createCampaign({ by: await actor("researcher"), now, ...(await given()), protocolVersionId: version.id, slots: {} });
    await expect(attempt).rejects.toMatchObject({ status: 422 });
  });

  test("a version of a retired protocol, a retired sensor and a retired rig are conflicts that name their fields", async () => {
    const by = await actor("researcher");
    const fine = await given();
    const retired = {
      protocolVersionId: (await buildProtocolVersion({ protocolId: (await buildProtocol({ retiredAt: now })).id })).id,
      sensorId: (await buildSensor({ retiredAt: now })).id,
      rigId: (await buildRig({ retiredAt: now })).id,
    };
    for (const [path, id] of Object.entries(retired))
      await expect(createCampaign({ by, now, ...fine, [path]: id }), path).rejects.toMatchObject({ status: 409, code: "retired", members: { errors: [{ path, message: expect.stringContaining("is retired") }] } });
    await expect(createCampaign({ by, now, ...fine, ...retired })).rejects.toMatchObject({ members: { errors: Object.keys(retired).map((path) => expect.objectContaining({ path })) } });
    const draft = await buildCampaign();
    await expect(changeCampaign({ by, now, campaignId: draft.id, protocolVersionId: retired.protocolVersionId })).rejects.toMatchObject({ code: "retired" });
    await expect(checkCampaign({ by, now, ...fine, protocolVersionId: retired.protocolVersionId, priority: 0 })).rejects.toMatchObject({ code: "retired" });
  });

});

describe("changeCampaign", () => {
  test("a draft moves to another rig with its slots", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign();
    const rig = await buildRig();
    await changeCampaign({ by, now, campaignId: campaign.id, rigId: rig.id, name: "Moved" });
    expect(await campaign.reload()).toMatchObject({ rigId: rig.id, name: "Moved", state: "draft" });
    expect(await auditedActions("campaign", campaign.id)).toEqual(["update"]);
  });

  test("a rig without the bound port is refused and nothing changes", async () => {
    const campaign = await buildCampaign();
    const rig = await buildRig({ ports: 0 });
    await expect(changeCampaign({ by: await actor("researcher"), now, campaignId: campaign.id, rigId: rig.id, name: "Moved" })).rejects.toMatchObject({ status: 422 });
    expect((await campaign.reload()).name).not.toBe("Moved");
  });

  test("of a queued one only name, priority and start change", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign({ state: "queued" });
    await changeCampaign({ by, now, campaignId: campaign.id, priority: 9, startAt: hours(5) });
    expect(await campaign.reload()).toMatchObject({ priority: 9, startAt: hours(5) });
    await expect(changeCampaign({ by, now, campaignId: campaign.id, sensorId: (await buildSensor()).id })).rejects.toMatchObject({ status: 409 });
  });

  test("a running campaign changes no more", async () => {
    const campaign = await buildCampaign({ state: "running" });
    await expect(changeCampaign({ by: await actor("researcher"), now, campaignId: campaign.id, name: "x" })).rejects.toMatchObject({ status: 409 });
  });
});

describe("deleteDraft", () => {
  test("takes the draft and its slots away; the audit log keeps who did", async () => {
    const campaign = await buildCampaign();
    await deleteDraft({ by: await actor("researcher"), now, campaignId: campaign.id });
    expect(await Campaign.findByPk(campaign.id)).toBeNull();
    expect(await CampaignSlot.count({ where: { campaignId: campaign.id } })).toBe(0);
    expect(await auditedActions("campaign", campaign.id)).toEqual(["delete draft"]);
  });

  test.each(["queued", "running", "finished"] as const)("never a %s campaign", async (state) => {
    const campaign = await buildCampaign({ state });
    await expect(deleteDraft({ by: await actor("researcher"), now, campaignId: campaign.id })).rejects.toMatchObject({ status: 409 });
  });

  test("the database itself keeps what was started", async () => {
    const campaign = await buildCampaign({ state: "running" });
    await expect(change("delete from campaign where id = $1", [campaign.id])).rejects.toThrow(/never deleted/);
  });
});
