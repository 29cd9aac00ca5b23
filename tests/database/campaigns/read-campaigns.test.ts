import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { campaignQuery, type CampaignSort } from "@/lib/campaigns/answers";
import { holdCampaign } from "@/lib/campaigns/hold";
import { openHold } from "@/lib/campaigns/open-hold";
import { readOverview } from "@/lib/campaigns/overview";
import { findCampaigns, getCampaign } from "@/lib/campaigns/read";
import { change, inTransaction, sequelize } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";
import { buildCampaign } from "@/tests/factories/campaign";
import { hours, now } from "@/tests/factories/now";
import { actor } from "@/tests/factories/person";
import { buildRig } from "@/tests/factories/rig";
import { buildSensor } from "@/tests/factories/sensor";

afterAll(() => sequelize.close());

let rigId: string;
let sensorId: string;
const ids: Record<string, string> = {};

beforeAll(async () => {
  rigId = (await buildRig({ name: "South bench" })).id;
  sensorId = (await buildSensor({ serial: "FK-0914" })).id;
  const make = async (name: string, given: Parameters<typeof buildCampaign>[0] = {}) => {
    ids[name] = (await buildCampaign({ name, rigId, sensorId, ...given })).id;
  };
  await make("draft");
  await make("late in line", { state: "queued", queuedAt: hours(2) });
  await make("early in line", { state: "queued", queuedAt: hours(-2) });
  await make("urgent", { state: "queued", queuedAt: hours(3), priority: 5 });
  await make("runs", { state: "running", startedAt: hours(-9), startedClock: hours(-9) });
  await make("finished", { state: "finished", endedAt: hours(-1), endedClock: hours(-1) });
  await make("Stopped", { state: "stopped", endedAt: hours(-5), endedClock: hours(-5) });
});

const names = async (query: Record<string, unknown>) => (await findCampaigns({ query: campaignQuery.parse({ rigId, ...query }), now })).items.map(({ name }) => name);

describe("the list", () => {
  test("each place holds its own states", async () => {
    expect(await names({ state: "on-rigs" })).toEqual(["runs"]);
    expect((await names({ state: "in-line" })).sort()).toEqual(["early in line", "late in line", "urgent"]);
    expect((await names({ state: "done" })).sort()).toEqual(["Stopped", "finished"]);
    expect(await names({ state: "draft" })).toEqual(["draft"]);
  });

  test("what was set aside is in line, not on the rig", async () => {
    await change(`update campaign set state = 'held', set_aside = true where id = $1`, [ids.runs]);
    expect(await names({ state: "on-rigs" })).toEqual([]);
    expect(await names({ state: "in-line" })).toContain("runs");
    await change(`update campaign set state = 'running', set_aside = false where id = $1`, [ids.runs]);
  });

  test("in line comes the highest priority first, then who waits longest", async () => {
    expect(await names({ state: "in-line", sort: "line" })).toEqual(["urgent", "early in line", "late in line"]);
  });

  test("names sort without regard to capitals, ends by their time, what has not ended last", async () => {
    expect(await names({ sort: "name" })).toEqual(["draft", "early in line", "finished", "late in line", "runs", "Stopped", "urgent"]);
    expect(await names({ state: "done", sort: "end" })).toEqual(["Stopped", "finished"]);
    expect((await names({ sort: "end" })).slice(0, 2)).toEqual(["Stopped", "finished"]);
    expect((await names({ sort: "-end" })).slice(-2)).toEqual(["finished", "Stopped"]);
  });

  const sorts: CampaignSort[] = ["newest", "oldest", "name", "-name", "start", "-start", "end", "-end", "repeats", "-repeats", "line"];
  test.each(sorts)("pages by %s hold every campaign once, in the order of one page", async (sort) => {
    const whole = await names({ sort });
    const paged: string[] = [];
    let cursor: string | undefined;
    do {
      const page = await findCampaigns({ query: campaignQuery.parse({ rigId, sort, limit: 2, cursor }), now });
      paged.push(...page.items.map(({ name }) => name));
      cursor = page.nextCursor ?? undefined;
    } while (cursor);
    expect(paged).toEqual(whole);
    expect(new Set(paged).size).toBe(7);
  });

  test("words are looked for in names, serials and numbers, and % is a sign like any other", async () => {
    expect(await names({ search: "URGENT" })).toEqual(["urgent"]);
    expect(await names({ search: "fk-09" })).toHaveLength(7);
    expect(await names({ search: `C-${ids.urgent}` })).toEqual(["urgent"]);
    expect(await names({ search: "%" })).toEqual([]);
  });

  test("a cursor that the list did not give out is refused", async () => {
    await expect(findCampaigns({ query: campaignQuery.parse({ cursor: "bm90IG9uZQ" }), now })).rejects.toMatchObject({ status: 400 });
  });
});

describe("the overview", () => {
  test("counts places, and what the filter would show with one word less", async () => {
    const elsewhere = (await buildRig()).id;
    const overview = await readOverview({ state: "done", rigId: elsewhere, sensorId });
    expect(overview).toMatchObject({ shown: 0, without: { state: 0, rigId: 2, sensorId: 0 } });
    expect((await readOverview({ rigId })).places).toEqual({ "on-rigs": 1, "in-line": 3, done: 2, draft: 1 });
  });

  test("of several holds the one that needs a person most gives the word", async () => {
    const other = await buildCampaign({ state: "running" });
    const before = (await readOverview({})).words;
    const by = await actor("researcher");
    await holdCampaign({ by, campaignId: other.id, now });
    expect((await readOverview({})).words).toEqual({ ...before, measuring: before.measuring - 1, paused: before.paused + 1 });
    await inTransaction((transaction) => openHold(transaction, { campaignId: other.id, reason: "limit", text: "beyond", by: "longreed", now }));
    expect((await readOverview({})).words).toEqual({ ...before, measuring: before.measuring - 1, halted: before.halted + 1 });
  });
});

describe("one campaign", () => {
  test("says where it stands, what it measured, and why it is held", async () => {
    const bench = await Bench.make();
    await bench.hello();
    const step = await bench.run((one) => one.role === "sample");
    if (!step) throw new Error("no sample phase came");
    await bench.upload(step, [0, 1, 2]);
    await holdCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, why: "window blind", now: bench.now });
    const campaign = await getCampaign({ campaignId: bench.campaign.id, now: bench.now });
    expect(campaign).toMatchObject({
      state: "held",
      word: "Paused",
      cycle: 1,
      progress: { repeats: 13 },
      step: { kind: "measure", medium: "sample", stored: 3, repeats: 20 },
      media: [{ medium: "air", repeats: 10 }, { medium: "sample", repeats: 3 }],
      holds: [{ reason: "person", text: "window blind" }],
      amendments: [],
      air: { shiftMHz: 0 },
    });
  });

  test("none is 404", async () => {
    await expect(getCampaign({ campaignId: "999999", now })).rejects.toMatchObject({ status: 404 });
  });
});
