import { afterAll, beforeEach, describe, expect, test } from "vitest";
import type { StepAnswer } from "@/lib/agents/schema";
import { row, rows, sequelize } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";

afterAll(() => sequelize.close());

let bench: Bench;

beforeEach(async () => {
  bench = await Bench.make();
  await bench.hello();
});

const isPhase = (step: StepAnswer) => step.kind === "measure" && step.role !== "find";
const stateOf = async (step: StepAnswer) => (await row<{ state: string }>(`select state from step where id = $1`, [step.id]))?.state;
const campaignState = async () => (await row<{ state: string }>(`select state from campaign where id = $1`, [bench.campaign.id]))?.state;
const openHolds = () =>
  rows<{ reason: string }>(`select reason from hold where campaign_id = $1 and released_at is null`, [bench.campaign.id]);

describe("giving out", () => {
  test("asking while a step is out returns it with a fresh lease and the gaps", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.upload(step, [0, 1, 4, 5]);
    const again = await bench.next();
    expect(again).toMatchObject({ id: step.id, attempt: 2, resumeFrom: 2, missing: [[2, 3], [6, 9]] });
    expect(again?.lease).not.toBe(step.lease);
  });

  test("readings are welcome under an old lease, finishing is not", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    const again = (await bench.next()) as StepAnswer;
    await expect(bench.upload(step, [0])).resolves.toMatchObject({ stored: [0], lease: "superseded" });
    await expect(bench.finish(step)).rejects.toMatchObject({ status: 409, code: "lease-lost" });
    await bench.upload(again, [1, 2, 3, 4, 5, 6, 7, 8, 9]);
    await expect(bench.finish(again)).resolves.toEqual({ step: "done", next: "ask" });
  });

  test("an expired lease stays valid until the step is given out again", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    bench.pass(3600);
    await bench.upload(step, Array.from({ length: 10 }, (_, i) => i));
    await expect(bench.finish(step)).resolves.toMatchObject({ step: "done" });
  });

  test("finishing again under the same lease is a success and changes nothing", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.carryOut(step);
    await expect(bench.finish(step)).resolves.toMatchObject({ step: "done" });
    await bench.work();
    const made = await rows(`select id from step where campaign_id = $1 and sequence = $2`, [bench.campaign.id, step.sequence + 1]);
    expect(made).toHaveLength(1);
  });

  test("done with readings missing is refused and names them", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.upload(step, [0, 1, 2, 5]);
    await expect(bench.finish(step)).rejects.toMatchObject({ status: 422, members: { missing: [[3, 4], [6, 9]] } });
    expect(await stateOf(step)).toBe("out");
  });

  test("a lease of nowhere opens nothing", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await expect(bench.upload({ ...step, lease: "forged" }, [0])).rejects.toMatchObject({ status: 409, code: "lease-lost" });
    await expect(bench.finish({ ...step, lease: "forged" })).rejects.toMatchObject({ status: 409, code: "lease-lost" });
  });

  test("another rig's step does not exist", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    const other = await Bench.make();
    await other.hello();
    await expect(other.upload(step, [0])).rejects.toMatchObject({ status: 404 });
    await expect(other.finish(step)).rejects.toMatchObject({ status: 404 });
  });
});

describe("readings", () => {
  test("the same reading again is a success, other content is told and the first stays", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.upload(step, [0, 1]);
    expect(await bench.upload(step, [1, 2])).toMatchObject({ stored: [2], alreadyStored: [1], differs: [] });
    const before = await row(`select content_hash, at from reading where step_id = $1 and idx = 0`, [step.id]);
    bench.truth = () => ({ f0Hz: 2390, q: 1700 });
    expect(await bench.upload(step, [0, 3])).toMatchObject({ stored: [3], alreadyStored: [], differs: [0] });
    expect(await row(`select content_hash, at from reading where step_id = $1 and idx = 0`, [step.id])).toEqual(before);
  });

  test("an index beyond the repeats refuses the whole batch", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await expect(bench.upload(step, [9, 10])).rejects.toMatchObject({ status: 422 });
    expect(await rows(`select idx from reading where step_id = $1`, [step.id])).toEqual([]);
  });

  test("readings for a closed step are kept, flagged late, and change no decision", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.upload(step, [0, 1, 2]);
    const { campaignId } = step;
    const { stopCampaign } = await import("@/lib/campaigns/stop");
    const { actor } = await import("@/tests/factories/person");
    await stopCampaign({ by: await actor("researcher"), campaignId, why: "the wire broke", now: bench.now });
    await bench.finish(step, { outcome: "interrupted" });
    await bench.work();
    expect(await bench.upload(step, [3])).toMatchObject({ stored: [3], wish: "stop" });
    expect(await row(`select flags from reading where step_id = $1 and idx = 3`, [step.id])).toEqual({ flags: 512 });
    expect(await row(`select flags from reading where step_id = $1 and idx = 2`, [step.id])).toEqual({ flags: 0 });
  });
});

describe("failures", () => {
  test("interrupted counts nowhere", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    for (let i = 0; i < 5; i++) {
      const out = (await bench.next()) as StepAnswer;
      await expect(bench.finish(out, { outcome: "interrupted" })).resolves.toMatchObject({ step: "ready" });
    }
    expect(await stateOf(step)).toBe("ready");
    expect(await campaignState()).toBe("running");
  });

  test("after maxAttempts without a new reading the step fails, the campaign holds and people are told", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    const failure = { code: "pump", message: "no flow", retry: true } as const;
    let out = step;
    for (let attempt = 1; attempt <= 3; attempt++) {
      const answer = await bench.finish(out, { outcome: "failed", failure });
      expect(answer.step).toBe(attempt < 3 ? "ready" : "failed");
      if (attempt < 3) out = (await bench.next()) as StepAnswer;
    }
    expect(await campaignState()).toBe("held");
    expect(await openHolds()).toEqual([{ reason: "failure" }]);
    const alarm = await row<{ text: string }>(`select text, kind, state from alarm where campaign_id = $1`, [bench.campaign.id]);
    expect(alarm).toMatchObject({ kind: "step-pump", state: "unacknowledged", text: expect.stringContaining("no flow") });
  });

  test("an attempt that stored something new does not count", async () => {
    let out = (await bench.run(isPhase)) as StepAnswer;
    const failure = { code: "instrument", message: "lost lock", retry: true } as const;
    for (let i = 0; i < 5; i++) {
      await bench.upload(out, [i]);
      expect(await bench.finish(out, { outcome: "failed", failure })).toMatchObject({ step: "ready" });
      out = (await bench.next()) as StepAnswer;
    }
    expect(out.resumeFrom).toBe(5);
  });

  test("a failure that cannot be retried holds at once, and resume here gives the same step out again", async () => {
    const step = (await bench.run(isPhase)) as StepAnswer;
    await bench.upload(step, [0, 1]);
    await bench.finish(step, { outcome: "failed", failure: { code: "sensor", message: "no signal", retry: false } });
    await bench.work();
    expect(await bench.next()).toBeUndefined();
    const { resumeCampaign } = await import("@/lib/campaigns/resume");
    const { actor } = await import("@/tests/factories/person");
    await resumeCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, from: "here", now: bench.now });
    expect(await bench.next()).toMatchObject({ id: step.id, resumeFrom: 2 });
  });

  test("an empty port is a person's errand: a task, no attempt used", async () => {
    const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
    await bench.finish(fill, { outcome: "failed", failure: { code: "port-empty", message: "", retry: true } });
    await bench.work();
    expect(await openHolds()).toEqual([{ reason: "task" }]);
    const task = await row<{ kind: string; port: number }>(`select kind, port from operator_task where campaign_id = $1 and state = 'open'`, [bench.campaign.id]);
    expect(task).toEqual({ kind: "load", port: 1 });
    expect(await row(`select empty_attempts from step where id = $1`, [fill.id])).toEqual({ empty_attempts: 0 });
  });
});

describe("physical acts", () => {
  test("a fill lost without a word is not pumped again: somebody looks first", async () => {
    const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
    await bench.hello("bench", true);
    expect(await bench.next()).toBeUndefined();
    expect(await openHolds()).toEqual([{ reason: "task" }]);
    expect(await row(`select kind from operator_task where campaign_id = $1 and state = 'open'`, [bench.campaign.id])).toEqual({ kind: "look" });
    expect(await stateOf(fill)).toBe("ready");
  });

  test("a fill whose progress was told is given out again with it", async () => {
    const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
    await bench.heartbeat({ state: "working", stepId: fill.id, lease: fill.lease, done: { volumeMl: 12.5 } });
    expect(await bench.next()).toMatchObject({ id: fill.id, done: { volumeMl: 12.5 } });
  });

  test("an attempt that was seen to progress is not an empty one, one without progress is", async () => {
    const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
    const emptyAttempts = () => row(`select empty_attempts as n from step where id = $1`, [fill.id]);
    let out = fill;
    for (const volumeMl of [5, 9, 14, 20]) {
      await bench.heartbeat({ state: "working", stepId: out.id, lease: out.lease, done: { volumeMl } });
      bench.pass(120);
      out = (await bench.next()) as StepAnswer;
      expect(await emptyAttempts()).toEqual({ n: 0 });
    }
    await bench.heartbeat({ state: "working", stepId: out.id, lease: out.lease, done: { volumeMl: 20 } });
    bench.pass(120);
    await bench.next();
    expect(await emptyAttempts()).toEqual({ n: 1 });
  });

  test("an agent that said it can repeat a fill gets it again", async () => {
    await bench.hello("bench", false, ["fill"]);
    const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
    expect(await bench.next()).toMatchObject({ id: fill.id, attempt: 2 });
  });
});

describe("sessions", () => {
  test("a second instance is refused while the first is fresh, unless it replaces it", async () => {
    await expect(bench.hello("another")).rejects.toMatchObject({ status: 409, code: "other-agent" });
    const first = bench.session;
    await bench.hello("another", true);
    bench.session = first;
    await expect(bench.heartbeat()).rejects.toMatchObject({ status: 409, code: "other-agent" });
  });

  test("an instance unheard for a minute makes room", async () => {
    bench.pass(61);
    await expect(bench.hello("another")).resolves.toMatchObject({ contract: 1 });
  });
});
