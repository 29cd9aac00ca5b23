import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { sweep } from "@/jobs/sweep";
import type { StepAnswer } from "@/lib/agents/schema";
import { watchSilence } from "@/lib/alarms/silence";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { holdCampaign } from "@/lib/campaigns/hold";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { change, inTransaction, row, rows, sequelize } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import { decodeColumns } from "@/lib/phases/columns";
import { fitStep } from "@/lib/readings/fit-step";
import { Bench } from "@/tests/factories/bench";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

let bench: Bench;
let researcher: Actor;

beforeEach(async () => {
  researcher = await actor("researcher");
  bench = await Bench.make();
  await bench.hello();
});

const isPhase = (step: StepAnswer) => step.kind === "measure" && step.role !== "find";
const all = (step: StepAnswer) => Array.from({ length: (step.params as { repeats: number }).repeats }, (_, i) => i);
const summary = (step: StepAnswer) =>
  row<{ n: number; nUsed: number; f0: number | null; columns: Buffer }>(
    `select s.n, s.n_used as "nUsed", s.f0_mean as f0, s.columns from phase p join phase_summary s on s.phase_id = p.id where p.step_id = $1`,
    [step.id],
  );

/** Until somebody waits for a lock in this file's database. */
async function untilBlocked(): Promise<void> {
  while (!(await row(`select pid from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`)));
}

test("a phase that ends while another process was about to look is closed with all its fits", async () => {
  const step = (await bench.run((s) => isPhase(s) && s.cycle === 1)) as StepAnswer;
  await bench.upload(step, all(step));
  await change(`update campaign set needs_advance = true where id = $1`, [bench.campaign.id]);
  let advancing: Promise<void> | undefined;
  await inTransaction(async (transaction) => {
    await row(`select id from rig where id = $1 for no key update`, [bench.rig.id], transaction);
    advancing = advanceCampaign({ campaignId: bench.campaign.id, now: bench.now });
    await untilBlocked();
    await change(`update step set state = 'done', closed_at = $2 where id = $1`, [step.id, bench.now], transaction);
  });
  await advancing;
  expect(await summary(step)).toMatchObject({ n: 10, nUsed: 10 });
});

test("two workers that advance and fit the same campaign at once make one next step and one fit a reading", async () => {
  const step = (await bench.run(isPhase)) as StepAnswer;
  await bench.upload(step, all(step));
  await bench.finish(step);
  const { now } = bench;
  await Promise.all(Array.from({ length: 6 }, (_, i) => (i % 2 ? fitStep({ stepId: step.id, now }) : advanceCampaign({ campaignId: bench.campaign.id, now }))));
  expect(await rows(`select id from step where campaign_id = $1 and sequence > $2`, [bench.campaign.id, step.sequence])).toHaveLength(1);
  expect(await rows(`select idx from fit where step_id = $1`, [step.id])).toHaveLength(10);
});

test("one agent that asks four times at once is lent one step, under one lease that counts", async () => {
  await bench.work();
  const answers = await Promise.all(Array.from({ length: 4 }, () => bench.next()));
  expect(new Set(answers.map((step) => step?.id)).size).toBe(1);
  const [out] = await rows<{ lease: string }>(`select lease from step where rig_id = $1 and state = 'out'`, [bench.rig.id]);
  expect(answers.filter((step) => step?.lease === out.lease)).toHaveLength(1);
});

test("readings that come too late are shown with their phase and change no value", async () => {
  const step = (await bench.run(isPhase)) as StepAnswer;
  await bench.upload(step, [0, 1, 2]);
  await holdCampaign({ by: researcher, campaignId: bench.campaign.id, now: bench.now });
  await bench.finish(step, { outcome: "interrupted" });
  await resumeCampaign({ by: researcher, campaignId: bench.campaign.id, from: "phase", now: bench.now });
  await bench.next();
  const before = await summary(step);
  expect(before).toMatchObject({ n: 3, nUsed: 0, f0: null });
  expect(await bench.upload(step, [3, 4])).toMatchObject({ stored: [3, 4], lease: "superseded" });
  await fitStep({ stepId: step.id, now: bench.now });
  const after = await summary(step);
  expect(after).toMatchObject({ n: 5, nUsed: 0, f0: null });
  expect([...decodeColumns(after?.columns as Buffer).leftOut]).toEqual([0, 0, 0, 1, 1]);
});

test("an agent that was replaced may still bring the readings that it has", async () => {
  const step = (await bench.run(isPhase)) as StepAnswer;
  const { session } = bench;
  await bench.hello("another", true);
  const replaced = bench.session;
  bench.session = session;
  await expect(bench.upload(step, [0, 1])).resolves.toMatchObject({ stored: [0, 1] });
  await expect(bench.finish(step)).rejects.toMatchObject({ status: 409, code: "other-agent" });
  bench.session = replaced;
  expect(await bench.next()).toMatchObject({ id: step.id, resumeFrom: 2 });
});

test("a fill lost while the campaign is held is not pumped again when it goes on: somebody looks first", async () => {
  const fill = (await bench.run(({ kind }) => kind === "fill")) as StepAnswer;
  await holdCampaign({ by: researcher, campaignId: bench.campaign.id, now: bench.now });
  await bench.hello("bench", true);
  expect(await bench.next()).toBeUndefined();
  await resumeCampaign({ by: researcher, campaignId: bench.campaign.id, from: "here", now: bench.now });
  expect(await bench.next()).toBeUndefined();
  expect(await rows(`select kind from operator_task where campaign_id = $1 and state = 'open'`, [bench.campaign.id])).toEqual([{ kind: "look" }]);
  expect(await row(`select state from step where id = $1`, [fill.id])).toEqual({ state: "ready" });
});

test("a word from the agent between the look and the alarm keeps the rig from being called silent", async () => {
  await bench.run(isPhase);
  bench.pass(400);
  const { now } = bench;
  let watching: Promise<void> | undefined;
  await inTransaction(async (transaction) => {
    await row(`select id from rig where id = $1 for no key update`, [bench.rig.id], transaction);
    watching = watchSilence({ now });
    await untilBlocked();
    await change(`update rig set last_contact_at = $2 where id = $1`, [bench.rig.id, now], transaction);
  });
  await watching;
  expect(await rows(`select id from alarm where rig_id = $1 and kind = 'silence'`, [bench.rig.id])).toEqual([]);
});

describe("what one campaign cannot keep from the others", () => {
  test("a campaign that cannot go on fails by itself; the sweep brings the others on and tells of it at the end", async () => {
    await bench.work();
    await change(`update campaign set cursor = jsonb_set(cursor, '{path}', '[{"id": "nowhere"}]'), needs_advance = true where id = $1`, [bench.campaign.id]);
    await change(`update step set state = 'done', closed_at = $2 where campaign_id = $1 and state in ('ready', 'out')`, [bench.campaign.id, bench.now]);
    const other = await Bench.make();
    await other.hello();
    await expect(sweep()).rejects.toThrow(AggregateError);
    expect(await row(`select state from campaign where id = $1`, [other.campaign.id])).toEqual({ state: "running" });
    await change(`update campaign set needs_advance = false where id = $1`, [bench.campaign.id]);
  });
});

describe("failures are told of each time", () => {
  test("a failure after a person let the campaign go on is mailed again, though nobody cleared the first", async () => {
    const failure = { outcome: "failed" as const, failure: { code: "pump" as const, message: "stuck", retry: false } };
    const mails = () => rows(`select id from notification where campaign_id = $1 or alarm_id in (select id from alarm where campaign_id = $1)`, [bench.campaign.id]);
    await bench.finish((await bench.run(isPhase)) as StepAnswer, failure);
    const first = (await mails()).length;
    expect(first).toBeGreaterThan(0);
    await bench.work();
    await resumeCampaign({ by: researcher, campaignId: bench.campaign.id, from: "here", now: bench.now });
    await bench.finish((await bench.next()) as StepAnswer, failure);
    expect((await mails()).length).toBe(2 * first);
  });
});

test("answers that were lost on the way use up no attempt; an agent that dies over a step three times does", async () => {
  const step = (await bench.run(isPhase)) as StepAnswer;
  for (let i = 0; i < 5; i++) expect(await bench.next()).toMatchObject({ id: step.id });
  for (let i = 0; i < 2; i++) {
    await bench.hello();
    expect(await bench.next()).toMatchObject({ id: step.id });
  }
  await bench.hello();
  expect(await bench.next()).toBeUndefined();
  expect(await row(`select state from step where id = $1`, [step.id])).toEqual({ state: "failed" });
});
