import { afterAll, expect, test } from "vitest";
import { moveInQueue } from "@/lib/campaigns/move-in-queue";
import { rows, sequelize } from "@/lib/db";
import { AuditEvent } from "@/models/audit-event";
import { buildCampaign } from "../../factories/campaign";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

async function aLine(length: number) {
  const rigId = (await buildRig()).id;
  const ids: string[] = [];
  for (let i = 0; i < length; i++) ids.push((await buildCampaign({ rigId, state: "queued", queuedAt: hours(i) })).id);
  return { rigId, ids };
}

const lineOf = async (rigId: string) =>
  (await rows<{ id: string }>("select id from campaign where rig_id = $1 and state = 'queued' order by priority desc, queued_at, id", [rigId])).map(({ id }) => id);

test("a queued campaign moves before another, to the end, and the line that the rig takes follows", async () => {
  const by = await actor("researcher");
  const { rigId, ids: [a, b, c] } = await aLine(3);
  expect(await moveInQueue({ by, now, campaignId: c, before: a })).toEqual({ id: c, line: [c, a, b] });
  expect(await lineOf(rigId)).toEqual([c, a, b]);
  await moveInQueue({ by, now, campaignId: c, before: b });
  expect(await lineOf(rigId)).toEqual([a, c, b]);
  await moveInQueue({ by, now, campaignId: a, before: null });
  expect(await lineOf(rigId)).toEqual([c, b, a]);
});

test("every campaign whose priority changed has an audit event, and a move to its own place leaves none", async () => {
  const by = await actor("researcher");
  const { ids: [a, b, c] } = await aLine(3);
  await moveInQueue({ by, now, campaignId: c, before: b });
  const events = await AuditEvent.findAll({ where: { entity: "campaign", entityId: [a, b, c] }, order: ["entityId"] });
  expect(events.map(({ entityId, action, personId }) => [entityId, action, personId])).toEqual([[a, "update", by.id], [c, "move in line", by.id]]);
  await moveInQueue({ by, now, campaignId: c, before: b });
  await moveInQueue({ by, now, campaignId: c, before: c });
  expect(await AuditEvent.count({ where: { entityId: [a, b, c] } })).toBe(2);
});

test("what runs has no place in line, another rig's line is not this one's, and an operator moves nothing", async () => {
  const by = await actor("researcher");
  const { rigId, ids: [a, b] } = await aLine(2);
  const other = await aLine(1);
  const running = await buildCampaign({ state: "running" });
  await expect(moveInQueue({ by, now, campaignId: running.id, before: null })).rejects.toMatchObject({ status: 409 });
  await expect(moveInQueue({ by, now, campaignId: b, before: other.ids[0] })).rejects.toMatchObject({ status: 422 });
  await expect(moveInQueue({ by, now, campaignId: "999999999", before: null })).rejects.toMatchObject({ status: 404 });
  await expect(moveInQueue({ by: await actor("operator"), now, campaignId: b, before: a })).rejects.toMatchObject({ status: 403 });
  expect(await lineOf(rigId)).toEqual([a, b]);
});

test("two people who move at once leave one line with everybody in it", async () => {
  const by = await actor("researcher");
  const { rigId, ids: [a, b, c, d] } = await aLine(4);
  await Promise.all([moveInQueue({ by, now, campaignId: d, before: a }), moveInQueue({ by, now, campaignId: c, before: a })]);
  const line = await lineOf(rigId);
  expect(line.slice(2)).toEqual([a, b]);
  expect(new Set(line)).toEqual(new Set([a, b, c, d]));
});
