import { describe, expect, test } from "vitest";
import { acknowledgeAlarm } from "@/lib/alarms/acknowledge";
import { clearAlarm } from "@/lib/alarms/clear";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { findAlarms, getAlarm } from "@/lib/alarms/read";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import { alarmQuery } from "@/lib/alarms/schema";
import { shelveAlarm } from "@/lib/alarms/shelve";
import { watchAlarms } from "@/lib/alarms/watch-alarms";
import { inTransaction } from "@/lib/db";
import { getMe } from "@/lib/people/me";
import { auditedActions } from "@/tests/factories/audit";
import { hours, now } from "@/tests/factories/now";
import { actor, buildPerson } from "@/tests/factories/person";
import { buildRig } from "@/tests/factories/rig";
import { Alarm } from "@/models/alarm";
import { Notification } from "@/models/notification";

const open = async ({ mail = true, at = now, rigId }: { mail?: boolean; at?: Date; rigId?: string } = {}) => {
  const rig = rigId ?? (await buildRig()).id;
  const { alarmId } = await inTransaction((transaction) =>
    openAlarm(transaction, { now: at, rigId: rig, source: "system", kind: "clock", text: "South bench: the clock is off", actionText: "Measuring goes on.", mail }),
  );
  return { alarmId, rigId: rig };
};
const comesBack = (rigId: string, at: Date) => inTransaction((transaction) => returnAlarm(transaction, { rigId, kind: "clock", now: at, text: "right again" }));
const eventsOf = async (alarmId: string) => (await getAlarm({ alarmId, now })).events.map(({ kind }) => kind);

describe("states of ISA-18.2", () => {
  test("acknowledged, then back within the limit: cleared by itself", async () => {
    const by = await actor("operator");
    const { alarmId, rigId } = await open();
    expect(await acknowledgeAlarm({ by, alarmId, now: hours(1) })).toMatchObject({ state: "acknowledged", acknowledgedBy: by.name, acknowledgedAt: hours(1).toISOString() });
    await comesBack(rigId, hours(2));
    const alarm = await getAlarm({ alarmId, now: hours(3) });
    expect(alarm).toMatchObject({ state: "cleared", clearedAt: hours(2).toISOString() });
    expect(alarm.clearedBy).toBeUndefined();
    expect(await auditedActions("alarm", alarmId)).toEqual(["acknowledge"]);
  });

  test("back within the limit while nobody looked: it stays until somebody does", async () => {
    const by = await actor("operator");
    const { alarmId, rigId } = await open();
    await comesBack(rigId, hours(1));
    expect((await getAlarm({ alarmId, now })).state).toBe("returned");
    expect(await acknowledgeAlarm({ by, alarmId, now: hours(2) })).toMatchObject({ state: "cleared", clearedBy: by.name });
    expect(await eventsOf(alarmId)).toEqual(expect.arrayContaining(["opened", "returned", "acknowledged", "cleared"]));
  });

  test("beyond the limit again before anybody looked: told of as new, in the same alarm", async () => {
    await buildPerson({ role: "operator" });
    const { alarmId, rigId } = await open();
    const told = await Notification.count({ where: { alarmId } });
    await comesBack(rigId, hours(1));
    const again = await open({ rigId, at: hours(2) });
    expect(again.alarmId).toBe(alarmId);
    expect(await getAlarm({ alarmId, now })).toMatchObject({ state: "unacknowledged" });
    expect(await Notification.count({ where: { alarmId } })).toBe(2 * told);
    expect(told).toBeGreaterThan(0);
  });

  test("the second to press is told who has it, and changes nothing", async () => {
    const [first, second] = [await actor("operator"), await actor("researcher")];
    const { alarmId } = await open();
    await acknowledgeAlarm({ by: first, alarmId, now });
    expect(await acknowledgeAlarm({ by: second, alarmId, now: hours(1) })).toMatchObject({ acknowledgedBy: first.name, acknowledgedAt: now.toISOString() });
    expect(await auditedActions("alarm", alarmId)).toEqual(["acknowledge"]);
  });

  test("two who press at once: one has it", async () => {
    const people = [await actor("operator"), await actor("operator")];
    const { alarmId } = await open();
    const said = await Promise.all(people.map((by) => acknowledgeAlarm({ by, alarmId, now })));
    expect(new Set(said.map(({ acknowledgedBy }) => acknowledgedBy)).size).toBe(1);
    expect(await auditedActions("alarm", alarmId)).toEqual(["acknowledge"]);
  });

  test("clearing takes a note, also of an alarm still beyond its limit; another's clearing stands", async () => {
    const [first, second] = [await actor("operator"), await actor("operator")];
    const { alarmId, rigId } = await open();
    expect(await clearAlarm({ by: first, alarmId, note: "clock set", now })).toMatchObject({ state: "cleared", clearNote: "clock set", clearedBy: first.name });
    expect(await clearAlarm({ by: first, alarmId, note: "clock set", now: hours(1) })).toMatchObject({ clearedAt: now.toISOString() });
    await expect(clearAlarm({ by: second, alarmId, note: "me too", now })).rejects.toMatchObject({ status: 409, message: expect.stringContaining(first.name) });
    await expect(acknowledgeAlarm({ by: second, alarmId, now })).rejects.toMatchObject({ status: 409 });
    expect((await open({ rigId })).alarmId).not.toBe(alarmId);
  });

  test("a viewer may read, not handle", async () => {
    const by = await actor("viewer");
    const { alarmId } = await open();
    const until = hours(1);
    await expect(acknowledgeAlarm({ by, alarmId, now })).rejects.toMatchObject({ status: 403 });
    await expect(clearAlarm({ by, alarmId, note: "x", now })).rejects.toMatchObject({ status: 403 });
    await expect(shelveAlarm({ by, alarmId, until, now })).rejects.toMatchObject({ status: 403 });
    expect((await getAlarm({ alarmId, now })).state).toBe("unacknowledged");
  });

  test("one that does not exist is 404", async () => {
    await expect(acknowledgeAlarm({ by: await actor("operator"), alarmId: "999999", now })).rejects.toMatchObject({ status: 404 });
  });
});

describe("the shelf", () => {
  test("lies over the state, is not counted, and ends by itself with mail", async () => {
    const by = await actor("operator");
    await Alarm.update({ state: "cleared", clearedAt: now }, { where: {} });
    const { alarmId } = await open();
    expect((await getMe({ by, now })).alarms).toBe(1);
    expect(await shelveAlarm({ by, alarmId, until: hours(4), note: "at 14:00", now })).toMatchObject({ state: "unacknowledged", shelvedUntil: hours(4).toISOString() });
    expect((await getMe({ by, now: hours(3) })).alarms).toBe(0);

    const told = await Notification.count({ where: { alarmId } });
    await watchAlarms({ now: hours(3.9) });
    expect(await Notification.count({ where: { alarmId } })).toBe(told);
    await watchAlarms({ now: hours(4) });
    expect((await getAlarm({ alarmId, now: hours(4) })).shelvedUntil).toBeUndefined();
    expect((await getMe({ by, now: hours(4) })).alarms).toBe(1);
    expect(await Notification.count({ where: { alarmId } })).toBe(2 * told);
    await watchAlarms({ now: hours(7.9) });
    expect(await Notification.count({ where: { alarmId } })).toBe(2 * told);
    expect(await eventsOf(alarmId)).toContain("unshelved");
  });

  test("can be ended by hand", async () => {
    const by = await actor("operator");
    const { alarmId } = await open();
    await shelveAlarm({ by, alarmId, until: hours(4), now });
    expect((await shelveAlarm({ by, alarmId, until: null, now: hours(1) })).shelvedUntil).toBeUndefined();
    expect(await auditedActions("alarm", alarmId)).toEqual(["shelve", "unshelve"]);
  });

  test.each([
    ["in the past", hours(-1)],
    ["for longer than seven days", hours(169)],
  ])("not %s", async (_, until) => {
    await expect(shelveAlarm({ by: await actor("operator"), alarmId: (await open()).alarmId, until, now })).rejects.toMatchObject({ status: 422 });
  });
});

describe("the reminder", () => {
  const kindsOf = async (alarmId: string) => [...new Set((await Notification.findAll({ where: { alarmId } })).map(({ kind }) => kind))].toSorted();

  test("goes out once after four hours that nobody had it", async () => {
    await buildPerson({ role: "operator" });
    const { alarmId } = await open();
    await watchAlarms({ now: hours(3.99) });
    expect(await kindsOf(alarmId)).toEqual(["alarm"]);
    await watchAlarms({ now: hours(4) });
    const once = await Notification.count({ where: { alarmId } });
    await watchAlarms({ now: hours(9) });
    expect(await kindsOf(alarmId)).toEqual(["alarm", "reminder"]);
    expect(await Notification.count({ where: { alarmId } })).toBe(once);
  });

  test("not of one that somebody has, nor of one that was not mailed", async () => {
    const taken = await open();
    await acknowledgeAlarm({ by: await actor("operator"), alarmId: taken.alarmId, now });
    const quiet = await open({ mail: false });
    await watchAlarms({ now: hours(5) });
    expect(await kindsOf(taken.alarmId)).toEqual(["alarm"]);
    expect(await kindsOf(quiet.alarmId)).toEqual([]);
  });
});

describe("lists", () => {
  test("by state, the newest first, a page at a time", async () => {
    await Alarm.update({ state: "cleared", clearedAt: now }, { where: {} });
    const rigId = (await buildRig()).id;
    const made: string[] = [];
    for (let i = 0; i < 3; i++) made.push((await open({ at: hours(i) })).alarmId);
    const find = (query: Record<string, unknown>) => findAlarms({ query: alarmQuery.parse(query), now });
    const first = await find({ state: "open", limit: 2 });
    expect(first.items.map(({ id }) => id)).toEqual([made[2], made[1]]);
    const second = await find({ state: "open", limit: 2, cursor: first.nextCursor });
    expect(second).toMatchObject({ items: [{ id: made[0] }], nextCursor: null });
    expect((await find({ state: "open", rigId })).items).toEqual([]);
    expect((await find({ state: "past" })).items.every(({ state }) => state === "cleared")).toBe(true);
  });

  test("mail goes to whoever asked for it, and to nobody who did not want it or has left", async () => {
    const [wants, doesNot, left] = [
      await buildPerson({ role: "viewer", notify: { alarms: true } }),
      await buildPerson({ role: "operator", notify: { alarms: false } }),
      await buildPerson({ role: "operator", closedAt: now }),
    ];
    const { alarmId } = await open();
    const addresses = (await Notification.findAll({ where: { alarmId } })).map(({ address }) => address);
    expect(addresses).toContain(wants.email);
    expect(addresses).not.toContain(doesNot.email);
    expect(addresses).not.toContain(left.email);
  });
});
