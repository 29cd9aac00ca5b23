import { afterAll, expect, it } from "vitest";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { inTransaction, row, sequelize } from "@/lib/db";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { Bench } from "../../factories/bench";

afterAll(() => sequelize.close());

it("a campaign waits for a simulated rig to tell its clock: started before, it would have no time to plan by and stand still for good", async () => {
  const bench = await Bench.make();
  const campaignId = bench.campaign.id;
  const state = async () => (await row<{ state: string }>(`select state from campaign where id = $1`, [campaignId]))?.state;

  await inTransaction((transaction) => wakeCampaign(transaction, campaignId));
  await advanceCampaign({ campaignId, now: bench.now });
  expect(await state()).toBe("queued");
  expect(await findCampaignsToAdvance({ now: bench.now })).not.toContain(campaignId);

  await bench.hello();
  expect(await bench.next()).toMatchObject({ campaignId, kind: "measure" });
  expect(await state()).toBe("running");
});
