import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { amendCampaign } from "@/lib/campaigns/amend";
import { holdCampaign } from "@/lib/campaigns/hold";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { setCampaignAside } from "@/lib/campaigns/set-aside";
import { stopCampaign } from "@/lib/campaigns/stop";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { row, rows, sequelize } from "@/lib/db";
import type { StepAnswer } from "@/lib/agents/schema";
import type { Actor } from "@/lib/people/actor";
import { Bench } from "@/tests/factories/bench";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { actor } from "@/tests/factories/person";
import { aDefinition, buildProtocolVersion } from "@/tests/factories/protocol";

afterAll(() => sequelize.close());

const PARK = [{ id: "park-drain", kind: "drain" as const }];

let bench: Bench;
let researcher: Actor;
let campaignId: string;

async function make(definition: Parameters<typeof Bench.make>[0] = {}) {
  bench = await Bench.make(definition);
  campaignId = bench.campaign.id;
  await bench.hello();
}

beforeEach(async () => {
  researcher = await actor("researcher");
  await make({ definition: { park: PARK } });
});

const inLiquid = (step: StepAnswer) => step.role === "sample";
const campaign = () => row<{ state: string; parking: string; setAside: boolean }>(`select state, parking, set_aside as "setAside" from campaign where id = $1`, [campaignId]);

describe("hold and resume", () => {
  test("the agent is told to hold, the step waits, and goes on where the stored readings end", async () => {
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await bench.upload(step, [0, 1, 2]);
    await holdCampaign({ by: researcher, campaignId, why: "window blind", now: bench.now });
    expect(await bench.upload(step, [3])).toMatchObject({ wish: "hold" });
    await bench.finish(step, { outcome: "interrupted" });
    expect(await bench.next()).toBeUndefined();
    await resumeCampaign({ by: researcher, campaignId, from: "here", now: bench.now });
    expect(await bench.next()).toMatchObject({ id: step.id, resumeFrom: 4, missing: [[4, 19]] });
  });

  test("an operator may hold and resume, a viewer may not", async () => {
    await bench.run(inLiquid);
    await expect(holdCampaign({ by: await actor("viewer"), campaignId, now: bench.now })).rejects.toMatchObject({ status: 403 });
    await holdCampaign({ by: await actor("operator"), campaignId, now: bench.now });
    await expect(resumeCampaign({ by: await actor("viewer"), campaignId, from: "here", now: bench.now })).rejects.toMatchObject({ status: 403 });
  });

  test("resuming from the phase measures it anew under a new sequence; what was measured stays", async () => {
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await bench.upload(step, [0, 1, 2]);
    await holdCampaign({ by: researcher, campaignId, now: bench.now });
    await bench.finish(step, { outcome: "interrupted" });
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: bench.now });
    const again = (await bench.next()) as StepAnswer;
    expect(again).toMatchObject({ kind: "measure", role: "sample", resumeFrom: 0, cycle: step.cycle });
    expect(again.sequence).toBeGreaterThan(step.sequence);
    expect(await row(`select count(*)::int as n from reading where step_id = $1`, [step.id])).toEqual({ n: 3 });
  });

  test("two people's holds and a limit's are one hold each; one resume releases them, and the audit log has all", async () => {
    await bench.run(inLiquid);
    await holdCampaign({ by: researcher, campaignId, now: bench.now });
    await holdCampaign({ by: await actor("operator"), campaignId, now: bench.now });
    expect(await rows(`select id from hold where campaign_id = $1`, [campaignId])).toHaveLength(1);
    await resumeCampaign({ by: researcher, campaignId, from: "here", now: bench.now });
    expect(await campaign()).toMatchObject({ state: "running" });
    const log = await rows<{ action: string }>(`select action from audit_event where entity = 'campaign' and entity_id = $1 and person_id is not null order by id`, [campaignId]);
    expect(log.map(({ action }) => action)).toEqual(["hold", "hold", "resume"]);
  });

  test("only what runs or is held can be held", async () => {
    const draft = await buildCampaign();
    await expect(holdCampaign({ by: researcher, campaignId: draft.id, now: bench.now })).rejects.toMatchObject({ status: 409 });
  });
});

describe("park", () => {
  test("a hold longer than parkAfterS with liquid in the cell parks; from here is refused, from the phase fills again", async () => {
    await make({ definition: { park: PARK, parkAfterS: 1800 } });
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await holdCampaign({ by: researcher, campaignId, now: bench.now });
    await bench.finish(step, { outcome: "interrupted" });
    expect(await bench.next()).toBeUndefined();
    bench.pass(1801);
    await findCampaignsToAdvance({ now: bench.now });
    const park = (await bench.next()) as StepAnswer;
    expect(park.kind).toBe("drain");
    expect(await bench.heartbeat({ state: "working", stepId: park.id, lease: park.lease })).toMatchObject({ wish: "none" });
    await bench.carryOut(park);
    expect(await bench.next()).toBeUndefined();
    expect(await campaign()).toMatchObject({ state: "held", parking: "parked" });
    await expect(resumeCampaign({ by: researcher, campaignId, from: "here", now: bench.now })).rejects.toMatchObject({ status: 422 });
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: bench.now });
    expect(await bench.next()).toMatchObject({ kind: "fill" });
  });

  test("stop parks, then frees the rig for the next in line", async () => {
    const step = (await bench.run(inLiquid)) as StepAnswer;
    const queued = await buildCampaign({ rigId: bench.rig.id, state: "queued" });
    await buildMount({ rigId: bench.rig.id, sensorId: queued.sensorId as string, position: 2 });
    await stopCampaign({ by: researcher, campaignId, why: "the wire broke", now: bench.now });
    expect(await bench.upload(step, [0])).toMatchObject({ wish: "stop" });
    await bench.finish(step, { outcome: "interrupted" });
    const park = (await bench.next()) as StepAnswer;
    expect(park).toMatchObject({ kind: "drain", campaignId });
    await bench.carryOut(park);
    expect(await bench.next()).toMatchObject({ campaignId: queued.id, campaignNumber: 2 });
    expect(await campaign()).toMatchObject({ state: "stopped", parking: "none" });
  });

  test("a campaign set aside is parked, gives its rig away, and comes back with a reference first", async () => {
    const step = (await bench.run(inLiquid)) as StepAnswer;
    await expect(setCampaignAside({ by: await actor("operator"), campaignId, why: "urgent job", now: bench.now })).rejects.toMatchObject({ status: 403 });
    await setCampaignAside({ by: researcher, campaignId, why: "urgent job", now: bench.now });
    await bench.finish(step, { outcome: "interrupted" });
    await bench.carryOut((await bench.next()) as StepAnswer);
    await bench.next();
    expect(await campaign()).toMatchObject({ state: "held", setAside: true });
    await expect(resumeCampaign({ by: researcher, campaignId, from: "here", now: bench.now })).rejects.toMatchObject({ status: 422 });
    await resumeCampaign({ by: researcher, campaignId, from: "phase", now: bench.now });
    expect(await bench.next()).toMatchObject({ kind: "measure", role: "reference" });
    expect(await bench.run()).toBeUndefined();
    expect(await campaign()).toMatchObject({ state: "finished", setAside: false });
  });
});

describe("mounts", () => {
  test("a campaign whose sensor is not mounted starts with a mount task", async () => {
    const other = await buildCampaign({ rigId: bench.rig.id, state: "queued" });
    await stopCampaign({ by: researcher, campaignId, why: "not wanted", now: bench.now });
    expect(await bench.next()).toBeUndefined();
    expect(await row(`select kind from operator_task where campaign_id = $1 and state = 'open'`, [other.id])).toEqual({ kind: "mount" });
    expect(await row(`select state from campaign where id = $1`, [other.id])).toEqual({ state: "held" });
  });

  test("after a re-mount a reference comes first and a new baseline begins", async () => {
    const step = (await bench.run((s) => inLiquid(s) && s.cycle === 2)) as StepAnswer;
    await bench.finish(step, { outcome: "interrupted" });
    await sequelize.query(`update mount set period = tstzrange(lower(period), $1) where rig_id = $2`, { bind: [bench.now, bench.rig.id] });
    await buildMount({ rigId: bench.rig.id, sensorId: bench.campaign.sensorId as string, from: bench.now });
    await sequelize.query(`update campaign set needs_advance = true where id = $1`, { bind: [campaignId] });
    const roles: string[] = [];
    await bench.run((next) => {
      roles.push(next.role ?? next.kind);
      return next.role === "reference";
    });
    expect(roles.filter((role) => role !== "drain" && role !== "find" && role !== "dry")).toEqual(["reference"]);
    expect(await bench.run()).toBeUndefined();
    const baselines = await rows<{ mountId: string }>(`select mount_id as "mountId" from baseline where campaign_id = $1`, [campaignId]);
    expect(new Set(baselines.map(({ mountId }) => mountId)).size).toBe(2);
  });
});

test("an amendment moves a held campaign to another version and each step keeps the version it came from", async () => {
  const step = (await bench.run((s) => inLiquid(s) && s.cycle === 1)) as StepAnswer;
  const version = await row<{ protocolId: string; id: string }>(
    `select v.protocol_id as "protocolId", v.id from campaign c join protocol_version v on v.id = c.protocol_version_id where c.id = $1`,
    [campaignId],
  );
  const [cycles] = aDefinition().blocks;
  const longer = await buildProtocolVersion({
    protocolId: version?.protocolId,
    version: 2,
    definition: aDefinition({ park: PARK, blocks: [{ ...cycles, times: 4 } as typeof cycles] }),
  });
  await expect(amendCampaign({ by: researcher, campaignId, protocolVersionId: longer.id, why: "one more", now: bench.now })).rejects.toMatchObject({ status: 409 });
  await holdCampaign({ by: researcher, campaignId, now: bench.now });
  await bench.finish(step, { outcome: "interrupted" });
  await amendCampaign({ by: researcher, campaignId, protocolVersionId: longer.id, why: "one more", now: bench.now });
  await resumeCampaign({ by: researcher, campaignId, from: "here", now: bench.now });
  await bench.run();
  const versions = await rows<{ versionId: string; cycles: number }>(
    `select protocol_version_id as "versionId", count(distinct cycle)::int as cycles from step where campaign_id = $1 group by 1 order by 1`,
    [campaignId],
  );
  expect(versions).toEqual([
    { versionId: version?.id, cycles: 1 },
    { versionId: longer.id, cycles: 4 },
  ]);
  expect(await row(`select from_sequence as "from" from amendment where campaign_id = $1`, [campaignId])).toEqual({ from: step.sequence + 1 });
});

test("a wait on a simulated clock ends when the agent reports a later time", async () => {
  const [cycles] = aDefinition().blocks;
  const inner = (cycles as { blocks: object[] }).blocks;
  await make({ definition: { blocks: [{ ...cycles, times: 2, blocks: [...inner, { id: "night", kind: "wait", seconds: 36_000 }] } as never] } });
  for (let step = await bench.next(); step; step = await bench.next()) await bench.carryOut(step);
  const { dueAt } = await bench.heartbeat();
  expect(Date.parse(dueAt as string) - bench.clockMs).toBeGreaterThan(35_000 * 1000);
  bench.pass(3600);
  await bench.heartbeat();
  expect(await bench.next()).toBeUndefined();
  bench.clockMs = Date.parse(dueAt as string);
  await bench.heartbeat();
  expect(await bench.next()).toMatchObject({ kind: "measure", cycle: 2 });
});
