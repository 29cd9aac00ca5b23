import { afterAll, beforeEach, describe, expect, test } from "vitest";
import type { StepAnswer } from "@/lib/agents/schema";
import { watchSilence } from "@/lib/alarms/silence";
import { holdCampaign } from "@/lib/campaigns/hold";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { setCampaignAside } from "@/lib/campaigns/set-aside";
import { stopCampaign } from "@/lib/campaigns/stop";
import { row, rows, sequelize } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import type { Definition } from "@/lib/protocol/schema";
import { giveBackRig, takeOverRig } from "@/lib/rigs/take-over";
import { answerTask } from "@/lib/tasks/answer";
import { Bench } from "@/tests/factories/bench";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

const sweep = { centre: 2100, span: { hz: 400 }, points: 61, dwell: { s: 0.01 }, driveV: 0.1 };
const liquid = { id: "liquid", kind: "measure" as const, medium: "sample", role: "sample" as const, repeats: 5, discard: 0, pauseS: 0, sweep };
const fill = { id: "fill", kind: "fill" as const, slot: "sample", volumeMl: 40, flowMlPerMin: 20 };
const drain = { id: "drain", kind: "drain" as const };
const PARK = { park: [{ id: "park-drain", kind: "drain" as const }], parkAfterS: 1800 };

let bench: Bench;
let campaignId: string;
let researcher: Actor;

async function make(definition: Partial<Definition>, options: { clock?: "real" | "simulated" } = {}) {
  bench = await Bench.make({ definition: { ...PARK, ...definition }, ...options });
  campaignId = bench.campaign.id;
  await bench.hello();
}

beforeEach(async () => {
  researcher = await actor("researcher");
});

const campaign = () =>
  row<{ state: string; parking: string; setAside: boolean }>(`select state, parking, set_aside as "setAside" from campaign where id = $1`, [campaignId]);
const openHolds = async () =>
  (await rows<{ reason: string }>(`select reason from hold where campaign_id = $1 and released_at is null order by reason`, [campaignId])).map(({ reason }) => reason);
const openTasks = () => rows<{ id: string; kind: string }>(`select id, kind from operator_task where campaign_id = $1 and state = 'open'`, [campaignId]);
const kinds = async () =>
  (await rows<{ kind: string; state: string }>(`select kind, state from step where campaign_id = $1 order by sequence`, [campaignId])).map(({ kind, state }) => `${kind} ${state}`);
const inLiquid = (step: StepAnswer) => step.kind === "measure" && step.role === "sample";
const now = () => bench.now;

/** Hears from the agent while time goes by, so that the rig is not silent. */
async function wait(seconds: number): Promise<void> {
  bench.pass(seconds);
  await bench.heartbeat();
}

async function parkNow(): Promise<void> {
  await wait(1801);
  const park = (await bench.next()) as StepAnswer;
  expect(park).toMatchObject({ kind: "drain", label: expect.any(String) });
  await bench.carryOut(park);
  await bench.next();
}

describe("parking while something else holds", () => {
  test("a question left open too long is parked; a person brings the campaign back and the question is asked again", async () => {
    await make({ blocks: [fill, { id: "ask", kind: "ask", instruction: "Look for bubbles", urgency: "normal" }, liquid, drain] });
    await bench.run();
    expect((await openTasks()).map(({ kind }) => kind)).toEqual(["ask"]);
    await parkNow();
    expect(await campaign()).toMatchObject({ state: "held", parking: "parked" });
    expect(await openTasks()).toEqual([]);
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: now() });
    expect(await bench.run()).toBeUndefined();
    expect((await kinds()).at(-2)).toBe("fill done");
    const [again] = await openTasks();
    expect(again.kind).toBe("ask");
    await answerTask({ by: researcher, taskId: again.id, answer: "done", now: now() });
    await bench.run();
    expect(await campaign()).toMatchObject({ state: "finished" });
  });

  test("an errand answered after the park brings the campaign back by itself, the cell filled again", async () => {
    await make({ blocks: [fill, { ...fill, id: "more", volumeMl: 10 }, liquid, drain] });
    const more = (await bench.run(({ label, sequence }) => sequence === 2 && label !== "")) as StepAnswer;
    await bench.finish(more, { outcome: "failed", failure: { code: "port-empty", message: "", retry: true } });
    await parkNow();
    expect(await campaign()).toMatchObject({ state: "held", parking: "parked" });
    const [load] = await openTasks();
    expect(load.kind).toBe("load");
    await answerTask({ by: researcher, taskId: load.id, answer: "done", now: now() });
    await bench.run();
    expect(await campaign()).toMatchObject({ state: "finished", parking: "none" });
    expect(await rows(`select id from phase where campaign_id = $1 and closed_at is not null`, [campaignId])).toHaveLength(1);
  });

  test("a rig heard again before anything was parked goes on with what is in the cell", async () => {
    await make({ blocks: [fill, liquid, drain], limits: [{ id: "quiet", kind: "silence", afterS: 600, does: ["hold"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }] });
    const step = (await bench.run(inLiquid)) as StepAnswer;
    bench.pass(700);
    await watchSilence({ now: now() });
    expect(await openHolds()).toEqual(["silence"]);
    bench.pass(2000);
    await bench.work();
    expect(await campaign()).toMatchObject({ state: "held", parking: "wanted" });
    await bench.upload(step, [0, 1, 2, 3, 4]);
    await bench.finish(step);
    await bench.run();
    expect(await campaign()).toMatchObject({ state: "finished", parking: "none" });
    expect(await kinds()).toEqual(["fill done", "measure done", "drain done"]);
  });

  test("a hold in air has nothing to park: going on from here keeps the step and its readings", async () => {
    const air = { ...liquid, id: "air", medium: "air", role: "reference" as const, sweep: { ...sweep, centre: 2400 } };
    await make({ blocks: [air] });
    const step = (await bench.run(({ kind }) => kind === "measure")) as StepAnswer;
    await bench.upload(step, [0, 1]);
    await holdCampaign({ by: researcher, campaignId, now: now() });
    await bench.finish(step, { outcome: "interrupted" });
    await wait(1801);
    expect(await bench.next()).toBeUndefined();
    expect(await bench.next()).toBeUndefined();
    await resumeCampaign({ by: researcher, campaignId, from: "here", now: now() });
    expect(await bench.next()).toMatchObject({ id: step.id, resumeFrom: 2 });
  });

  test("going on from the phase while a question is open asks it again instead of waiting for the old one", async () => {
    await make({ blocks: [fill, { id: "ask", kind: "ask", instruction: "Look for bubbles", urgency: "normal" }, liquid, drain] });
    await bench.run();
    await holdCampaign({ by: researcher, campaignId, now: now() });
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: now() });
    await bench.run();
    const open = await openTasks();
    expect(open).toHaveLength(1);
    expect(await openHolds()).toEqual(["task"]);
    await answerTask({ by: researcher, taskId: open[0].id, answer: "done", now: now() });
    await bench.run();
    expect(await campaign()).toMatchObject({ state: "finished" });
  });
});

describe("a person's hands at the rig", () => {
  test("nothing is parked while the rig is taken over, whether the campaign is set aside or stopped meanwhile", async () => {
    for (const end of [setCampaignAside, stopCampaign]) {
      await make({ blocks: [fill, liquid, drain] });
      const step = (await bench.run(inLiquid)) as StepAnswer;
      await takeOverRig({ by: researcher, rigId: bench.rig.id, now: now() });
      await bench.finish(step, { outcome: "interrupted" });
      await end({ by: researcher, campaignId, why: "urgent", now: now() });
      expect(await bench.next()).toBeUndefined();
      await giveBackRig({ by: researcher, rigId: bench.rig.id, now: now() });
      const park = (await bench.next()) as StepAnswer;
      expect(park.kind).toBe("drain");
      await bench.carryOut(park);
      await bench.next();
      expect(await campaign()).toMatchObject(end === stopCampaign ? { state: "stopped", parking: "none" } : { state: "held", setAside: true });
    }
  });
});

describe("a park step that cannot be done", () => {
  const pump = { outcome: "failed" as const, failure: { code: "pump" as const, message: "stuck", retry: false } };

  test("of a stopped campaign: somebody empties the cell by hand, then the rig is free for the next in line", async () => {
    await make({ blocks: [fill, liquid, drain] });
    const step = (await bench.run(inLiquid)) as StepAnswer;
    const queued = await buildCampaign({ rigId: bench.rig.id, state: "queued" });
    await buildMount({ rigId: bench.rig.id, sensorId: queued.sensorId as string, position: 2 });
    await stopCampaign({ by: researcher, campaignId, why: "the wire broke", now: now() });
    await bench.finish(step, { outcome: "interrupted" });
    await bench.finish((await bench.next()) as StepAnswer, pump);
    expect(await bench.next()).toBeUndefined();
    expect(await bench.next()).toBeUndefined();
    const [look, ...others] = await openTasks();
    expect([look.kind, others]).toEqual(["look", []]);
    await answerTask({ by: researcher, taskId: look.id, answer: "done", now: now() });
    expect(await bench.next()).toMatchObject({ campaignId: queued.id });
    expect(await campaign()).toMatchObject({ state: "stopped", parking: "none" });
  });

  test("of a held campaign: a person can still let it go on from the phase, the cell emptied first", async () => {
    await make({ blocks: [fill, liquid, drain] });
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await holdCampaign({ by: researcher, campaignId, now: now() });
    await bench.finish(step, { outcome: "interrupted" });
    await wait(1801);
    await bench.finish((await bench.next()) as StepAnswer, pump);
    expect(await bench.next()).toBeUndefined();
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: now() });
    expect(await bench.next()).toMatchObject({ kind: "drain" });
    await bench.run();
    expect(await campaign()).toMatchObject({ state: "finished" });
  });

  test("a full waste container is one errand, and the step waits for its answer", async () => {
    await make({ blocks: [fill, liquid, drain] });
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await stopCampaign({ by: researcher, campaignId, why: "the wire broke", now: now() });
    await bench.finish(step, { outcome: "interrupted" });
    const park = (await bench.next()) as StepAnswer;
    await bench.finish(park, { outcome: "failed", failure: { code: "waste-full", message: "", retry: true } });
    expect(await bench.next()).toBeUndefined();
    const [waste, ...others] = await openTasks();
    expect([waste.kind, others]).toEqual(["waste", []]);
    await answerTask({ by: researcher, taskId: waste.id, answer: "done", now: now() });
    expect(await bench.next()).toMatchObject({ id: park.id });
  });
});

test("a bottle found empty by a campaign that was stopped meanwhile holds nothing up: the cell is parked", async () => {
  await make({ blocks: [fill, { ...fill, id: "more" }, liquid, drain] });
  const more = (await bench.run(({ sequence }) => sequence === 2)) as StepAnswer;
  await stopCampaign({ by: researcher, campaignId, why: "the wire broke", now: now() });
  await bench.work();
  await bench.finish(more, { outcome: "failed", failure: { code: "port-empty", message: "", retry: true } });
  const park = (await bench.next()) as StepAnswer;
  expect(park).toMatchObject({ kind: "drain" });
  expect(await openTasks()).toEqual([]);
});
