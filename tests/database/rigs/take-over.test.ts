import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { giveBackRig, takeOverRig } from "@/lib/rigs/take-over";
import { Hold } from "@/models/hold";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

test("taking over holds the campaign until the rig is given back, and both are recorded", async () => {
  const by = await actor("operator");
  const campaign = await buildCampaign({ state: "running" });
  const rigId = campaign.rigId!;
  const { holdId } = await takeOverRig({ by, now, rigId, why: "a bubble in the cell" });
  expect((await campaign.reload()).state).toBe("held");
  expect(await Hold.findByPk(holdId)).toMatchObject({ reason: "takeOver", openedBy: by.id, releasedAt: null });

  await giveBackRig({ by, now: hours(1), rigId });
  expect(await campaign.reload()).toMatchObject({ state: "running", needsAdvance: true });
  expect(await Hold.findByPk(holdId)).toMatchObject({ releasedAt: hours(1), releasedBy: by.id });
  expect(await auditedActions("rig", rigId)).toEqual(["take over", "give back"]);
});

test("taking over twice is one hold", async () => {
  const by = await actor("operator");
  const campaign = await buildCampaign({ state: "running" });
  const first = await takeOverRig({ by, now, rigId: campaign.rigId! });
  expect(await takeOverRig({ by, now, rigId: campaign.rigId! })).toEqual(first);
  expect(await Hold.count({ where: { campaignId: campaign.id } })).toBe(1);
});

test("giving back leaves the campaign held while another hold is open", async () => {
  const by = await actor("operator");
  const campaign = await buildCampaign({ state: "held" });
  await Hold.create({ campaignId: campaign.id, reason: "person", text: "wait", openedAt: now });
  await takeOverRig({ by, now, rigId: campaign.rigId! });
  await giveBackRig({ by, now, rigId: campaign.rigId! });
  expect((await campaign.reload()).state).toBe("held");
});

test("a free rig cannot be taken over, a rig that nobody has cannot be given back", async () => {
  const by = await actor("operator");
  const rig = await buildRig();
  await expect(takeOverRig({ by, now, rigId: rig.id })).rejects.toMatchObject({ status: 409, code: "rig-free" });
  const campaign = await buildCampaign({ state: "running" });
  await expect(giveBackRig({ by, now, rigId: campaign.rigId! })).rejects.toMatchObject({ status: 409 });
});

test("a viewer takes over nothing", async () => {
  const by = await actor("viewer");
  await expect(takeOverRig({ by, now, rigId: "1" })).rejects.toMatchObject({ status: 403 });
  await expect(giveBackRig({ by, now, rigId: "1" })).rejects.toMatchObject({ status: 403 });
});
