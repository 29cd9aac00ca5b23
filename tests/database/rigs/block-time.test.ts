import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { blockTime, findBlockedTimes, unblockTime } from "@/lib/rigs/block-time";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

test("two blocked times of one rig may touch but not overlap, and a withdrawn one is free again", async () => {
  const by = await actor("administrator");
  const rigId = (await buildRig()).id;
  const first = await blockTime({ by, now, rigId, from: hours(10), to: hours(20), why: "pump service" });
  await blockTime({ by, now, rigId, from: hours(20), to: hours(30), why: "probe check" });
  await expect(blockTime({ by, now, rigId, from: hours(19), to: hours(21), why: "again" })).rejects.toMatchObject({ status: 409 });
  await unblockTime({ by, now, windowId: first.id });
  await blockTime({ by, now, rigId, from: hours(15), to: hours(20), why: "again" });
  const { items } = await findBlockedTimes({ rigId, now, limit: 50 });
  expect(items.map(({ why }) => why)).toEqual(["again", "probe check"]);
});

test("a time that ends before it begins is 422, and an operator blocks nothing", async () => {
  const rigId = (await buildRig()).id;
  const administrator = await actor("administrator");
  await expect(blockTime({ by: administrator, now, rigId, from: hours(2), to: hours(1), why: "x" })).rejects.toMatchObject({ status: 422 });
  const operator = await actor("operator");
  await expect(blockTime({ by: operator, now, rigId, from: hours(1), to: hours(2), why: "x" })).rejects.toMatchObject({ status: 403 });
});

test("what has passed is judged by the rig's own clock, and nothing has before a simulated one was told", async () => {
  const by = await actor("administrator");
  const behind = await buildRig({ clock: "simulated", reportedClock: hours(-100) });
  await blockTime({ by, now, rigId: behind.id, from: hours(-90), to: hours(-80), why: "still to come there" });
  await blockTime({ by, now, rigId: behind.id, from: hours(-120), to: hours(-110), why: "over there" });
  const silent = await buildRig({ clock: "simulated" });
  await blockTime({ by, now, rigId: silent.id, from: hours(-90), to: hours(-80), why: "some day" });
  const whys = async (rigId: string) => (await findBlockedTimes({ rigId, now, limit: 50 })).items.map(({ why }) => why);
  expect(await whys(behind.id)).toEqual(["still to come there"]);
  expect(await whys(silent.id)).toEqual(["some day"]);
});
