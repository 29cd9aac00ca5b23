import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { findUsedIn } from "@/lib/liquids/used-in";
import { Lot } from "@/models/lot";
import { Bench } from "../../factories/bench";
import { buildCampaign } from "../../factories/campaign";
import { buildLiquid } from "../../factories/liquid";
import { buildLot } from "../../factories/lot";
import { aDefinition, buildProtocolVersion } from "../../factories/protocol";

afterAll(() => sequelize.close());

test("a campaign counts the fills that were done and what they used, with the newest f0 in the liquid", async () => {
  const bench = await Bench.make();
  await bench.hello();
  await bench.run((step) => step.sequence > 8);
  const slot = await sequelize.model("CampaignSlot").findOne({ where: { campaignId: bench.campaign.id } });
  const lot = await Lot.findByPk(slot?.get("lotId") as string, { rejectOnEmpty: true });
  const { items: [used] } = await findUsedIn({ liquidId: lot.liquidId, limit: 50 });
  const fills = bench.handled.filter(({ kind }) => kind === "fill").length;
  expect(fills).toBeGreaterThan(0);
  expect(used).toMatchObject({ campaignId: bench.campaign.id, lotCode: lot.code, state: "running", fills, usedMl: 40 * fills });
  expect(used.f0?.mean).toBeCloseTo(2100, 0);
});

test("of a campaign that is not over the set-points of its protocol count, of one that is over those it measured at", async () => {
  const [block] = aDefinition().blocks;
  const settle = { id: "settle", kind: "settle" as const, temperatureC: 35, toleranceC: 0.1, holdS: 60, timeoutS: 600 };
  const version = await buildProtocolVersion({ definition: aDefinition({ blocks: [settle, block] }) });
  const lot = await buildLot();
  const slots = { sample: { port: 1, lotId: lot.id } };
  const finished = await buildCampaign({ state: "finished", protocolVersionId: version.id, slots });
  const queued = await buildCampaign({ state: "queued", protocolVersionId: version.id, slots });
  const { items } = await findUsedIn({ liquidId: lot.liquidId, limit: 50 });
  expect(items.map(({ campaignId, setPointsC }) => [campaignId, setPointsC])).toEqual([[queued.id, [35]], [finished.id, []]]);
});

test("pages follow one another without a gap, and a liquid that is not there is 404", async () => {
  const lot = await buildLot({ liquidId: (await buildLiquid()).id });
  const ids: string[] = [];
  for (let i = 0; i < 3; i++) ids.unshift((await buildCampaign({ slots: { sample: { port: 1, lotId: lot.id } } })).id);
  const first = await findUsedIn({ liquidId: lot.liquidId, limit: 2 });
  const second = await findUsedIn({ liquidId: lot.liquidId, limit: 2, cursor: first.nextCursor ?? undefined });
  expect([...first.items, ...second.items].map(({ campaignId }) => campaignId)).toEqual(ids);
  expect(second.nextCursor).toBeNull();
  await expect(findUsedIn({ liquidId: "999999999", limit: 1 })).rejects.toMatchObject({ status: 404 });
});
