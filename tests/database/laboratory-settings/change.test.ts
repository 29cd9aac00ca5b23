import { afterAll, expect, test } from "vitest";
import { GET, PATCH } from "@/app/api/laboratory/route";
import { sequelize } from "@/lib/db";
import { readLaboratory } from "@/lib/laboratory";
import { changeLaboratory } from "@/lib/laboratory-settings/change";
import { auditedActions } from "../../factories/audit";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

test("until an administrator sets it, the zone is that of the first rig; what is left out of a change stays", async () => {
  await buildRig({ timeZone: "Asia/Tokyo" });
  expect(await readLaboratory()).toEqual({ name: "Laboratory", timeZone: "Asia/Tokyo" });
  const by = await actor("administrator");
  await changeLaboratory({ by, now, name: "Harrowmere" });
  await changeLaboratory({ by, now, timeZone: "Europe/Lisbon" });
  expect(await readLaboratory()).toEqual({ name: "Harrowmere", timeZone: "Europe/Lisbon" });
  await changeLaboratory({ by, now, timeZone: "Europe/Lisbon" });
  expect(await auditedActions("setting", "laboratory")).toEqual(["change the laboratory", "change the laboratory"]);
});

test("two changes at once are both kept", async () => {
  const by = await actor("administrator");
  await Promise.all([changeLaboratory({ by, now, name: "Two" }), changeLaboratory({ by, now, timeZone: "Europe/Paris" })]);
  expect(await readLaboratory()).toEqual({ name: "Two", timeZone: "Europe/Paris" });
});

test("everybody reads it, an administrator changes it", async () => {
  const { cookie } = await signedInAs("researcher");
  expect((await GET(request("GET", "/api/laboratory", { cookie }), at())).status).toBe(200);
  expect((await PATCH(request("PATCH", "/api/laboratory", { cookie, body: { name: "Mine" } }), at())).status).toBe(403);
});

test.each([{}, { name: " " }, { timeZone: "Mars/Olympus" }, { timeZone: "" }, { name: "A", owner: "B" }])("%j is refused", async (body) => {
  const { cookie } = await signedInAs("administrator");
  expect((await PATCH(request("PATCH", "/api/laboratory", { cookie, body }), at())).status).toBe(400);
});
