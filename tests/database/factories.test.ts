import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { CampaignSlot } from "@/models/campaign-slot";
import { Port } from "@/models/port";
import { buildCampaign } from "../factories/campaign";
import { buildMount } from "../factories/mount";

afterAll(() => sequelize.close());

test("a campaign is built from nothing, with a bottle on the port that its slot is bound to", async () => {
  const campaign = await buildCampaign();
  const slot = await CampaignSlot.findOne({ where: { campaignId: campaign.id }, rejectOnEmpty: true });
  const port = await Port.findOne({ where: { rigId: campaign.rigId!, number: slot.port }, rejectOnEmpty: true });
  expect(port).toMatchObject({ remainingMl: 1000 });
  expect(port.loadId).not.toBeNull();
});

test.each(["queued", "running", "held", "finished"] as const)("a campaign is built as %s", async (state) => {
  expect(await buildCampaign({ state })).toMatchObject({ state });
});

test("a mount is open until it is given an end", async () => {
  const mount = await buildMount();
  await mount.reload();
  expect(mount.period[1]?.value ?? null).toBeNull();
});
