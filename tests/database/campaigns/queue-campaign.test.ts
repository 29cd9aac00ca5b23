import { afterAll, describe, expect, test } from "vitest";
import { checkCampaign } from "@/lib/campaigns/check";
import { queueCampaign } from "@/lib/campaigns/queue";
import { sequelize } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";
import { CautionAcknowledgement } from "@/models/caution-acknowledgement";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { buildLiquid } from "../../factories/liquid";
import { buildLoad } from "../../factories/load";
import { buildLot } from "../../factories/lot";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

describe("queueCampaign", () => {
  test("puts a harmless draft in line with what it will take, and wakes dispatch", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign();
    expect(await queueCampaign({ by, now, campaignId: campaign.id })).toEqual({ id: campaign.id, state: "queued" });
    await campaign.reload();
    expect(campaign).toMatchObject({ state: "queued", queuedAt: now, needsAdvance: true });
    expect(campaign.planned).toMatchObject({ cycles: 3, repeats: 90 });
    expect(campaign.planned!.lowS).toBeLessThanOrEqual(campaign.planned!.seconds);
    expect(await auditedActions("campaign", campaign.id)).toEqual(["queue"]);
  });

  test("a flammable liquid needs this person's word for each caution; it is kept word for word", async () => {
    const by = await actor("researcher");
    const { campaign, liquidId } = await flammable();
    const codes = [`flammable:${liquidId}`, `dry:${liquidId}`];

    const refusal = await queueCampaign({ by, now, campaignId: campaign.id, acknowledgements: [codes[0]] }).catch((error: unknown) => error);
    expect(refusal).toMatchObject({ status: 422, code: "cautions", members: { cautions: codes.map((code) => expect.objectContaining({ code })) } });
    expect((await campaign.reload()).state).toBe("draft");
    expect(await CautionAcknowledgement.count({ where: { campaignId: campaign.id } })).toBe(0);

    await queueCampaign({ by, now, campaignId: campaign.id, acknowledgements: codes });
    const kept = await CautionAcknowledgement.findAll({ where: { campaignId: campaign.id }, order: ["id"] });
    expect(kept.map(({ code, personId, at }) => ({ code, personId, at }))).toEqual(codes.map((code) => ({ code, personId: by.id, at: now })));
    expect(kept[0].message).toContain("Highly flammable liquid and vapour");
    expect(await auditedActions("campaign", campaign.id)).toEqual(["acknowledge caution", "acknowledge caution", "queue"]);
  });

  test("a code that belongs to no caution of this campaign is no word for anything", async () => {
    const { campaign } = await flammable();
    await expect(queueCampaign({ by: await actor("researcher"), now, campaignId: campaign.id, acknowledgements: ["flammable:0"] })).rejects.toMatchObject({ status: 422 });
  });

  test("queueing twice changes nothing the second time", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign();
    await queueCampaign({ by, now, campaignId: campaign.id });
    await queueCampaign({ by, now: hours(1), campaignId: campaign.id });
    expect((await campaign.reload()).queuedAt).toEqual(now);
  });

  test("a protocol that the rig cannot do is refused, with the place in the protocol", async () => {
    const { abilities } = await buildRig();
    const rig = await buildRig({ abilities: { ...abilities!, kinds: ["measure", "fill", "drain"] } });
    const campaign = await buildCampaign({ rigId: rig.id });
    await expect(queueCampaign({ by: await actor("researcher"), now, campaignId: campaign.id })).rejects.toMatchObject({
      status: 422,
      code: "does-not-fit",
      members: { errors: [{ path: "definition.blocks.0.blocks.4" }] },
    });
  });

  test.each(["running", "held", "finished"] as const)("a %s campaign cannot be queued", async (state) => {
    const campaign = await buildCampaign({ state });
    await expect(queueCampaign({ by: await actor("researcher"), now, campaignId: campaign.id })).rejects.toMatchObject({ status: 409 });
  });

  test("a slot that lost its binding is refused, and a rig retired meanwhile", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign();
    await CampaignSlot.destroy({ where: { campaignId: campaign.id } });
    await expect(queueCampaign({ by, now, campaignId: campaign.id })).rejects.toMatchObject({ status: 422, members: { errors: [{ path: "slots.sample" }] } });
    const retired = await buildCampaign({ rigId: (await buildRig({ retiredAt: now })).id });
    await expect(queueCampaign({ by, now, campaignId: retired.id })).rejects.toMatchObject({ status: 409 });
  });

  test.each(["viewer", "operator"] as const)("is refused to a %s", async (role) => {
    const campaign = await buildCampaign();
    await expect(queueCampaign({ by: await actor(role), now, campaignId: campaign.id })).rejects.toMatchObject({ status: 403 });
  });

  test("there is no such campaign: 404", async () => {
    await expect(queueCampaign({ by: await actor("researcher"), now, campaignId: "999999" })).rejects.toMatchObject({ status: 404 });
  });
});

describe("checkCampaign", () => {
  test("says what is needed of what is loaded, and stores nothing", async () => {
    const by = await actor("researcher");
    const campaign = await buildCampaign();
    const before = await Campaign.count();
    const checked = await check(campaign, by);
    expect(checked.slots).toEqual([{ slot: "sample", neededMl: 120, port: 1, loadedMl: 1000 }]);
    expect(checked.estimate).toMatchObject({ cycles: 3, repeats: 90, wasteMl: 120 });
    expect(checked.problems).toEqual(expect.arrayContaining([expect.objectContaining({ path: "sensorId", severity: "warning" })]));
    expect(checked.problems.filter(({ severity }) => severity === "error")).toEqual([]);
    expect(await Campaign.count()).toBe(before);
  });

  test("too little in the bottle, another liquid or lot on the port, and nothing there are each said", async () => {
    const by = await actor("researcher");
    const rig = await buildRig();
    const lot = await buildLot();
    const campaign = await buildCampaign({ rigId: rig.id, slots: { sample: { port: 2, lotId: lot.id } } });
    const said = async () => (await check(campaign, by)).problems.filter(({ path }) => path === "slots.sample").map(({ message }) => message);
    expect(await said()).toEqual([expect.stringContaining("Nothing stands on port 2")]);
    await buildLoad({ rigId: rig.id, port: 2, lotId: lot.id, volumeMl: 100 });
    expect(await said()).toEqual([expect.stringContaining("somebody has to load more")]);
    await buildLoad({ rigId: rig.id, port: 2, lotId: (await buildLot({ liquidId: lot.liquidId })).id });
    expect(await said()).toEqual([expect.stringContaining(`not ${lot.code}`)]);
    await buildLoad({ rigId: rig.id, port: 2 });
    expect(await said()).toEqual([expect.stringContaining("has to be changed")]);
  });

  test("the waste of the whole campaign is held against what the container still takes", async () => {
    const rig = await buildRig({ wasteCapacityMl: 1000, wasteMl: 900 });
    const campaign = await buildCampaign({ rigId: rig.id });
    expect((await check(campaign, await actor("researcher"))).cautions).toEqual([expect.objectContaining({ code: "waste" })]);
  });
});

async function check({ protocolVersionId, sensorId, rigId, id }: Campaign, by: Actor) {
  const bindings = await CampaignSlot.findAll({ where: { campaignId: id } });
  const slots = Object.fromEntries(bindings.map(({ slot, port, lotId }) => [slot, { port, lotId }]));
  return checkCampaign({ by, now, protocolVersionId: protocolVersionId!, sensorId: sensorId!, rigId: rigId!, slots });
}

async function flammable(): Promise<{ campaign: Campaign; liquidId: string }> {
  const liquid = await buildLiquid({ ghs: ["H225"], flashPointC: 12 });
  const lot = await buildLot({ liquidId: liquid.id });
  const load = await buildLoad({ lotId: lot.id });
  return { campaign: await buildCampaign({ rigId: load.rigId }), liquidId: liquid.id };
}
