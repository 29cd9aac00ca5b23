import { afterAll, beforeAll, expect, test } from "vitest";
import { PATCH as changeCampaignRoute, DELETE as deleteCampaignRoute } from "@/app/api/campaigns/[id]/route";
import { POST as queueRoute } from "@/app/api/campaigns/[id]/queue/route";
import { POST as checkRoute } from "@/app/api/campaigns/check/route";
import { GET as choicesRoute } from "@/app/api/campaigns/choices/route";
import { POST as makeCampaign } from "@/app/api/campaigns/route";
import { GET as listLots, POST as makeLot } from "@/app/api/liquids/[id]/lots/route";
import { GET as oneLiquid } from "@/app/api/liquids/[id]/route";
import { GET as listLiquids, POST as makeLiquid } from "@/app/api/liquids/route";
import { POST as endMountRoute } from "@/app/api/mounts/[id]/end/route";
import { GET as listLoads, POST as makeLoad } from "@/app/api/rigs/[id]/loads/route";
import { GET as oneRig } from "@/app/api/rigs/[id]/route";
import { POST as takeOverRoute } from "@/app/api/rigs/[id]/take-over/route";
import { GET as listTokens, POST as makeToken } from "@/app/api/rigs/[id]/tokens/route";
import { POST as emptyWasteRoute } from "@/app/api/rigs/[id]/waste-emptied/route";
import { GET as contactsRoute } from "@/app/api/rigs/contacts/route";
import { GET as listRigs, POST as makeRig } from "@/app/api/rigs/route";
import { GET as listMounts, POST as makeMount } from "@/app/api/sensors/[id]/mounts/route";
import { GET as listSensors, POST as makeSensor } from "@/app/api/sensors/route";
import { sequelize } from "@/lib/db";
import type { Handler } from "@/lib/http/operation";
import type { Role } from "@/lib/permissions";
import { buildProtocolVersion } from "../../factories/protocol";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

const cookies = new Map<Role, string>();
beforeAll(async () => {
  for (const role of ["administrator", "researcher", "operator", "viewer"] as const) cookies.set(role, (await signedInAs(role)).cookie);
});

type Sent = { as?: Role; params?: Record<string, string>; body?: unknown; query?: string; method?: string };

async function call(handler: Handler, { as = "administrator", params, body, query = "", method = body === undefined ? "GET" : "POST" }: Sent = {}) {
  const response = await handler(request(method, `/api/x${query}`, { cookie: cookies.get(as), body }), at(params));
  return { status: response.status, answer: response.status === 204 ? undefined : ((await response.json()) as Record<string, unknown>) };
}

/** Makes one and answers its id. */
async function make(handler: Handler, body: unknown, params?: Record<string, string>): Promise<string> {
  const { status, answer } = await call(handler, { body, params });
  expect(answer).toHaveProperty("id");
  expect(status).toBe(201);
  return String(answer?.id);
}

test("from nothing to a queued campaign over HTTP, with the word of a person for its cautions", async () => {
  const rigId = await make(makeRig, { name: "Harbour bench", timeZone: "Europe/Lisbon", ports: 2, wasteCapacityMl: 3000 });
  const liquidId = await make(makeLiquid, { name: "2-Propanol", model: "2-propanol", hazards: { ghs: ["H225"], flashPointC: 12 } });
  const lotId = await make(makeLot, { code: "IP-1", receivedAt: "2026-05-01T00:00:00+02:00", certificate: [{ temperatureC: 20, densityKgM3: 785.1, uDensityKgM3: 0.1 }] }, { id: liquidId });
  await make(makeLoad, { port: 2, lotId, volumeMl: 900, how: "replace" }, { id: rigId });
  const sensorId = await make(makeSensor, { serial: "WR-1", kind: "wire", nominalF0Hz: 2400, nominalQ: 1800 });
  const mountId = await make(makeMount, { rigId }, { id: sensorId });
  const protocolVersionId = (await buildProtocolVersion()).id;

  const draft = { protocolVersionId, sensorId, rigId, slots: { sample: { port: 2, lotId } }, startAt: "2099-01-01T08:00:00Z" };
  expect((await call(choicesRoute)).answer).toMatchObject({ rigs: [{ id: rigId, ahead: 0 }], lots: [{ id: lotId }], sensors: [{ id: sensorId, rigId }] });
  expect((await call(checkRoute, { body: draft })).answer).toMatchObject({ slots: [{ slot: "sample", neededMl: 120, loadedMl: 900 }] });
  const campaignId = await make(makeCampaign, draft);
  expect((await call(changeCampaignRoute, { method: "PATCH", params: { id: campaignId }, body: { name: "Named" } })).answer).toEqual({ id: campaignId, name: "Named" });

  const refused = await call(queueRoute, { as: "researcher", params: { id: campaignId }, body: {} });
  expect(refused).toMatchObject({ status: 422, answer: { type: "/problems/cautions", cautions: [{ code: `flammable:${liquidId}`, message: expect.any(String) }, { code: `dry:${liquidId}` }] } });
  const acknowledgements = (refused.answer?.cautions as { code: string }[]).map(({ code }) => code);
  expect(await call(queueRoute, { as: "researcher", params: { id: campaignId }, body: { acknowledgements } })).toEqual({ status: 200, answer: { id: campaignId, state: "queued" } });
  expect((await call(deleteCampaignRoute, { method: "DELETE", params: { id: campaignId } })).status).toBe(409);

  expect((await call(oneRig, { params: { id: rigId } })).answer).toMatchObject({ queued: 1, campaign: null, ports: [{ bottle: null }, { bottle: { lotCode: "IP-1", tint: 2 } }], mounts: [{ id: mountId }] });
  expect((await call(oneLiquid, { params: { id: liquidId } })).answer).toMatchObject({ letter: "P", lots: 1, loadedOn: 1 });
  expect((await call(takeOverRoute, { params: { id: rigId }, body: {} })).status).toBe(409);
  expect((await call(emptyWasteRoute, { as: "operator", params: { id: rigId }, method: "POST" })).answer).toEqual({ wasteMl: 0 });
  expect((await call(endMountRoute, { as: "operator", params: { id: mountId }, body: {} })).status).toBe(200);
});

test("an agent token is in its own answer and in no other", async () => {
  const rigId = await make(makeRig, { name: "Token bench", timeZone: "UTC", ports: 0 });
  const { answer } = await call(makeToken, { params: { id: rigId }, body: { name: "bench computer" } });
  expect(answer?.token).toMatch(/^lr_agent_/);
  const list = await call(listTokens, { params: { id: rigId } });
  expect(list.answer).toMatchObject({ items: [{ name: "bench computer", last4: String(answer?.token).slice(-4) }], nextCursor: null });
  expect(JSON.stringify(list.answer)).not.toContain(String(answer?.token));
  expect((await call(listTokens, { as: "researcher", params: { id: rigId } })).status).toBe(403);
});

test.each([
  ["rigs", listRigs, undefined],
  ["contacts", contactsRoute, undefined],
  ["loads", listLoads, { id: "1" }],
  ["sensors", listSensors, undefined],
  ["mounts", listMounts, { id: "1" }],
  ["liquids", listLiquids, undefined],
  ["lots", listLots, { id: "1" }],
] as const)("a viewer reads %s", async (_, handler, params) => {
  const { status, answer } = await call(handler, { as: "viewer", params });
  expect(status).toBe(200);
  expect(answer?.items).toBeInstanceOf(Array);
});

test.each([
  ["a rig", makeRig, { name: "X", timeZone: "UTC", ports: 1 }, "researcher", undefined],
  ["a sensor", makeSensor, { serial: "X", kind: "wire", nominalF0Hz: 1, nominalQ: 1 }, "operator", undefined],
  ["a liquid", makeLiquid, { name: "X", model: "water" }, "operator", undefined],
  ["a load", makeLoad, { port: 1, lotId: "1", volumeMl: 1, how: "replace" }, "viewer", { id: "1" }],
  ["a mount", makeMount, { rigId: "1" }, "viewer", { id: "1" }],
] as const)("%s is not for a role below it", async (_, handler, body, as, params) => {
  expect((await call(handler, { as, body, params })).status).toBe(403);
});

test("a bad body is 400 and names each field; a cursor that is none too; an id that is none is 404", async () => {
  const bad = await call(makeLiquid, { body: { name: "", model: "table", table: [{ temperatureC: 20, densityKgM3: -1, viscosityMPaS: 1 }], colour: "red" } });
  expect(bad.status).toBe(400);
  expect((bad.answer?.errors as { path: string }[]).map(({ path }) => path)).toEqual(expect.arrayContaining(["name", "table", "table.0.densityKgM3", "colour"]));
  expect((await call(listRigs, { query: "?cursor=nonsense" })).status).toBe(400);
  expect((await call(oneRig, { params: { id: "no-id" } })).status).toBe(404);
  expect((await call(oneRig, { params: { id: "999999" } })).status).toBe(404);
});
