import { afterAll, describe, expect, test } from "vitest";
import { heartbeat } from "@/lib/agents/heartbeat";
import { checkCampaign } from "@/lib/campaigns/check";
import { moveInQueue } from "@/lib/campaigns/move-in-queue";
import { startNextOnRig } from "@/lib/campaigns/start";
import { sequelize } from "@/lib/db";
import { blockTime } from "@/lib/rigs/block-time";
import { readTimeline } from "@/lib/rigs/timeline";
import { reordered } from "@/lib/rigs/reordered";
import { Campaign } from "@/models/campaign";
import { Bench } from "../../factories/bench";
import { buildCampaign } from "../../factories/campaign";
import { buildLoad } from "../../factories/load";
import { buildMount } from "../../factories/mount";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildProtocolVersion } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";

afterAll(() => sequelize.close());

const tenHours = { seconds: 36_000, lowS: 32_400, highS: 39_600, steps: 15, repeats: 90, cycles: 3 };
const at = (h: number) => hours(h).toISOString();
const laneOf = async (rigId: string) => (await readTimeline({ now, rigId })).items[0];

async function aLine(...starts: (number | null)[]) {
  const rigId = (await buildRig()).id;
  const ids: string[] = [];
  for (const [i, start] of starts.entries()) ids.push((await buildCampaign({ rigId, state: "queued", queuedAt: hours(-10 + i), startAt: start === null ? null : hours(start), planned: tenHours })).id);
  return { rigId, ids };
}

describe("a rig's weeks", () => {
  test("a free rig is free now, and plans nothing", async () => {
    const lane = await laneOf((await buildRig()).id);
    expect(lane.campaigns).toEqual([]);
    expect(lane.freeFrom).toBe(at(0));
  });

  test("its line runs one after the other by the estimates, each with its range, drawn as outlines to its end", async () => {
    const { rigId, ids } = await aLine(null, null);
    const { campaigns, freeFrom } = await laneOf(rigId);
    expect(campaigns.map(({ id, from, end }) => [id, from, end.at])).toEqual([[ids[0], at(0), at(10)], [ids[1], at(10), at(20)]]);
    expect(campaigns[1].end.range).toEqual({ earliest: at(18), latest: at(22) });
    expect(freeFrom).toBe(at(20));
    const { segments } = campaigns[1].strip;
    expect(segments.every(({ planned }) => planned)).toBe(true);
    expect([segments[0].from, segments.at(-1)?.to]).toEqual([at(10), at(20)]);
    expect(campaigns[1].strip.liquids).toHaveLength(1);
  });

  test("moving on the screen shows what moving in the database gives", async () => {
    const { rigId, ids: [a, b, c] } = await aLine(null, null, 3);
    const before = await laneOf(rigId);
    const tried = reordered(before, [c, a, b]);
    await moveInQueue({ by: await actor("researcher"), now, campaignId: c, before: a });
    const after = await laneOf(rigId);
    const places = ({ campaigns }: typeof before) => campaigns.map(({ id, from, end }) => [id, from, end]);
    expect(places(tried)).toEqual(places(after));
    expect(places(tried)).not.toEqual(places(before));
  });

  test("bottles and waste still have to give what the line takes", async () => {
    const { rigId } = await aLine(null, null);
    // Three turns of 40 mL each, twice.
    expect((await laneOf(rigId)).needs).toEqual({ ports: [{ port: 1, ml: 0, inLineMl: 240 }], wasteMl: 0, inLineWasteMl: 240 });
  });

  test("what is on the rig comes first with its past, and a held one leaves the end open", async () => {
    const bench = await Bench.make();
    await bench.hello();
    await bench.run((step) => step.sequence > 4);
    const waiting = await buildCampaign({ rigId: bench.rig.id, state: "queued", planned: tenHours });
    const running = await laneOf(bench.rig.id);
    expect(running.campaigns.map(({ id, queued }) => [id, queued])).toEqual([[bench.campaign.id, false], [waiting.id, true]]);
    expect(running.campaigns[0].strip.segments.some(({ planned }) => !planned)).toBe(true);
    expect(running.campaigns[1].from).toBe(running.campaigns[0].end.at);
    expect(running.needs.ports[0].ml).toBeLessThan(120);
    await Campaign.update({ state: "held" }, { where: { id: bench.campaign.id } });
    const held = await laneOf(bench.rig.id);
    expect(held.freeFrom).toBeNull();
    expect(held.campaigns.map(({ end }) => end.range)).toEqual([null, null]);
  });
});

describe("blocked time", () => {
  test("no campaign begins in it: the line waits for its end on the screen and on the rig", async () => {
    const { rigId, ids } = await aLine(null);
    await blockTime({ by: await actor("administrator"), now, rigId, from: hours(-1), to: hours(5), why: "pump service" });
    const lane = await laneOf(rigId);
    expect(lane.blocked.map(({ why }) => why)).toEqual(["pump service"]);
    expect(lane.campaigns[0].from).toBe(at(5));
    await startNextOnRig({ rigId, now });
    expect((await Campaign.findByPk(ids[0]))?.state).toBe("queued");
    await startNextOnRig({ rigId, now: hours(5) });
    expect((await Campaign.findByPk(ids[0]))?.state).toBe("running");
  });

  test("a simulated rig is told when the blocked time ends, so that its clock can go there", async () => {
    const bench = await Bench.make();
    await bench.hello();
    const to = new Date(bench.clockMs + 6 * 3_600_000);
    await blockTime({ by: await actor("administrator"), now, rigId: bench.rig.id, from: new Date(bench.clockMs - 1000), to, why: "pump service" });
    expect(await bench.next()).toBeUndefined();
    const { dueAt } = await heartbeat({ agent: bench.agent, session: bench.session, now: bench.now, body: { clock: bench.clock, state: "idle" } });
    expect(dueAt).toBe(to.toISOString());
  });
});

describe("a campaign that is being put together", () => {
  test("stands in its rig's line behind those of its priority and before those of a lower one, with what needs a person", async () => {
    const { rigId, ids: [first] } = await aLine(null);
    const low = await buildCampaign({ rigId, state: "queued", priority: -5, planned: tenHours });
    const sensor = await buildSensor();
    const version = await buildProtocolVersion();
    const { lotId } = await buildLoad({ rigId, port: 2, volumeMl: 60 });
    const draft = { by: await actor("researcher"), now, protocolVersionId: version.id, sensorId: sensor.id, rigId, slots: { sample: { port: 2, lotId } } };
    const { forecast } = await checkCampaign(draft);
    expect(forecast?.lane.campaigns.map(({ id }) => id)).toEqual([first, "", low.id]);
    expect(forecast?.from).toBe(at(10));
    expect(forecast?.people.map(({ label }) => label.replace(/ .*/, ""))).toEqual(["mount", "load"]);
    expect(forecast?.people[0].at).toBe(at(10));
    await buildMount({ rigId, sensorId: sensor.id });
    expect((await checkCampaign(draft)).forecast?.people.map(({ label }) => label.replace(/ .*/, ""))).toEqual(["load"]);
    expect(await Campaign.count({ where: { rigId } })).toBe(2);
  });
});
