import { afterAll, expect, test } from "vitest";
import { GET as GET_ALL } from "@/app/api/people/route";
import { GET, PATCH } from "@/app/api/me/route";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { inTransaction, rows, sequelize } from "@/lib/db";
import { queueTaskMail } from "@/lib/notifications/queue-task-mail";
import { mailWishes } from "@/lib/people/mail-wishes";
import { ROLES } from "@/lib/permissions";
import { openTask } from "@/lib/tasks/open-task";
import { now } from "../../factories/now";
import { buildPerson } from "../../factories/person";
import { buildRig } from "../../factories/rig";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

const mailed = async (kind: string) =>
  (await rows<{ id: string }>("select distinct person_id as id from notification where kind = $1 order by 1", [kind])).map(({ id }) => id).toSorted();

test("who gets mail of alarms and tasks is who the settings say, said or unsaid, in every role", async () => {
  const wishes = [{}, { alarms: true }, { alarms: false }, { tasks: true }, { tasks: false }];
  const people = await Promise.all(ROLES.flatMap((role) => wishes.map((notify) => buildPerson({ role, notify: notify as Record<string, boolean> }))));
  await buildPerson({ role: "operator", closedAt: now, notify: { alarms: true, tasks: true } });
  const rig = await buildRig();
  await inTransaction(async (transaction) => {
    await openAlarm(transaction, { now, rigId: rig.id, source: "system", kind: "silence", text: "silent", actionText: "held", mail: true });
    const taskId = await openTask(transaction, { now, rigId: rig.id, kind: "waste", instruction: "Empty the waste" });
    await queueTaskMail(transaction, { taskId, now });
  });
  const wanting = (what: "alarms" | "tasks") => people.filter((person) => mailWishes(person)[what]).map(({ id }) => id).toSorted();
  expect(await mailed("alarm")).toEqual(wanting("alarms"));
  expect(await mailed("task")).toEqual(wanting("tasks"));
});

test("one wish is changed and the other stays; a wish that is none is refused", async () => {
  const { cookie } = await signedInAs("operator");
  const change = async (notify: unknown) => (await PATCH(request("PATCH", "/api/me", { cookie, body: { notify } }), at())).status;
  expect(await change({ tasks: false })).toBe(200);
  expect(await (await GET(request("GET", "/api/me", { cookie }), at())).json()).toMatchObject({ notify: { alarms: true, tasks: false } });
  expect(await change({ weather: true })).toBe(400);
});

test("a visit is seen by administrators, and a person who never came is not", async () => {
  const never = await buildPerson();
  const { person, cookie } = await signedInAs("operator");
  await GET(request("GET", "/api/me", { cookie }), at());
  const administrator = await signedInAs("administrator");
  const listed = await (await GET_ALL(request("GET", "/api/people?limit=200", { cookie: administrator.cookie }), at())).json();
  const seenAt = (id: string) => listed.items.find((item: { id: string }) => item.id === id).seenAt;
  expect(Math.abs(Date.parse(seenAt(person.id)) - Date.now())).toBeLessThan(60_000);
  expect(seenAt(never.id)).toBeNull();
});
