import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { readStrip, readStrips } from "@/lib/campaigns/strip";
import { stripsQuery } from "@/lib/campaigns/strip-schema";
import { sequelize } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";
import { buildCampaign } from "@/tests/factories/campaign";
import { now } from "@/tests/factories/now";

afterAll(() => sequelize.close());

let bench: Bench;

beforeAll(async () => {
  bench = await Bench.make();
  await bench.hello();
  await bench.run((step) => step.role === "sample" && step.cycle === 2);
}, 60_000);

describe("strips", () => {
  test("the past lies before the clock, the plan behind it, each in the order of time", async () => {
    const { segments, now: clock } = await readStrip({ campaignId: bench.campaign.id, now: bench.now });
    const at = Date.parse(clock ?? "");
    const past = segments.filter(({ planned }) => !planned);
    const plan = segments.filter(({ planned }) => planned);
    expect(past.filter(({ kind, find }) => !find && (kind === "air" || kind === "liquid")).map(({ kind, cycle }) => `${kind} ${cycle}`)).toEqual(["air 1", "liquid 1", "air 2", "liquid 2"]);
    expect(plan.filter(({ kind }) => kind === "liquid").map(({ cycle }) => cycle)).toContain(3);
    for (const { from, to } of past) expect([Date.parse(from) <= Date.parse(to), Date.parse(to) <= at]).toEqual([true, true]);
    for (const { from } of plan) expect(Date.parse(from)).toBeGreaterThanOrEqual(at);
    expect(segments.map(({ from }) => from)).toEqual(segments.map(({ from }) => from).toSorted());
  });

  test("a queued campaign is drawn as its plan, without a present", async () => {
    const { id } = await buildCampaign({ state: "queued" });
    const strip = await readStrip({ campaignId: id, now });
    expect(strip.now).toBeUndefined();
    expect(strip.segments.length).toBeGreaterThan(5);
    expect(strip.segments.every(({ planned }) => planned)).toBe(true);
    expect(strip.liquids).toEqual([{ slot: "sample", name: expect.any(String), letter: expect.any(String), tint: 1 }]);
  });

  test("many in one call are the same as each by itself, and take as many queries", async () => {
    const others = await Promise.all([buildCampaign(), buildCampaign({ state: "finished" })]);
    const campaignIds = [bench.campaign.id, ...others.map(({ id }) => id)];
    const count = async (work: () => Promise<unknown>) => {
      let queries = 0;
      const { options } = sequelize as unknown as { options: { logging: false | (() => void) } };
      options.logging = () => queries++;
      await work();
      options.logging = false;
      return queries;
    };
    const one = await count(() => readStrips({ campaignIds: campaignIds.slice(0, 1), now: bench.now }));
    expect(await count(() => readStrips({ campaignIds, now: bench.now }))).toBe(one);
    const { items } = await readStrips({ campaignIds, now: bench.now });
    for (const { campaignId, strip } of items) expect(await readStrip({ campaignId, now: bench.now })).toEqual(strip);
    expect(items.map(({ campaignId }) => campaignId).toSorted()).toEqual(campaignIds.toSorted());
  });

  test("none is 404, and ids that are none are refused", async () => {
    await expect(readStrip({ campaignId: "999999", now })).rejects.toMatchObject({ status: 404 });
    expect(stripsQuery.safeParse({ ids: "1,x" }).success).toBe(false);
    expect(stripsQuery.safeParse({ ids: "" }).success).toBe(false);
  });
});
