import { hash } from "@node-rs/argon2";
import type { StepAnswer } from "@/lib/agents/schema";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { holdCampaign } from "@/lib/campaigns/hold";
import { writeNote } from "@/lib/campaigns/notes";
import { inTransaction, row } from "@/lib/db";
import { takeOverRig } from "@/lib/rigs/take-over";
import { blockTime } from "@/lib/rigs/block-time";
import { newToken } from "@/lib/tokens";
import { AccessToken } from "@/models/access-token";
import { Exclusion } from "@/models/exclusion";
import { FitRun } from "@/models/fit-run";
import { Invitation } from "@/models/invitation";
import { Notification } from "@/models/notification";
import { OperatorTask } from "@/models/operator-task";
import { PasswordReset } from "@/models/password-reset";
import { ProtocolVersion } from "@/models/protocol-version";
import { Bench } from "./bench";
import { buildAgentToken } from "./agent-token";
import { buildCampaign } from "./campaign";
import { buildImportRun } from "./import-run";
import { buildLiquid } from "./liquid";
import { buildLoad } from "./load";
import { buildLot } from "./lot";
import { buildMount } from "./mount";
import { hours, next, now } from "./now";
import { actor, buildPerson } from "./person";
import { aDefinition, buildProtocol, buildProtocolVersion } from "./protocol";
import { buildRig } from "./rig";
import { buildSensor } from "./sensor";
import { agentToken, cookieOf, ORIGIN, signedInAs, tokenOf } from "./session";
import { formOf } from "./upload";

/** What a call needs: parts of its address, values at names in its body, its form where it takes one, and who sends it where that is no administrator. */
export type Prepared = { params?: Record<string, string>; ids?: Record<string, unknown>; form?: () => FormData; query?: string; headers?: Record<string, string> };

const made = async (thing: Promise<{ id: string }>): Promise<Prepared> => ({ params: { id: (await thing).id } });
const nothing = async (): Promise<Prepared> => ({});

/** A list with something in it. */
const listOf = (...things: (() => Promise<unknown>)[]) => async (): Promise<Prepared> => {
  for (const make of things) await make();
  return {};
};

const campaignIn = (state: "draft" | "queued" | "running" | "held") => made(buildCampaign({ state }));

async function heldCampaign(): Promise<{ campaignId: string; protocolVersionId: string }> {
  const bench = await Bench.make();
  await bench.hello();
  const step = (await bench.run(({ kind, role }) => kind === "measure" && role !== "find")) as StepAnswer;
  await holdCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, now: bench.now });
  await bench.finish(step, { outcome: "interrupted" });
  return { campaignId: bench.campaign.id, protocolVersionId: String(bench.campaign.protocolVersionId) };
}

let measured: Promise<string> | undefined;
/** A campaign with closed phases to read from, made once. */
const measuredCampaign = () =>
  (measured ??= (async () => {
    const bench = await Bench.make();
    await bench.hello();
    await bench.run();
    return bench.campaign.id;
  })());
const ofMeasured = async (): Promise<Prepared> => ({ params: { id: await measuredCampaign() } });

/** The longest phase of the measured campaign. */
async function aPhase(): Promise<{ id: string; stepId: string }> {
  const found = await row<{ id: string; stepId: string }>(
    `select p.id, p.step_id as "stepId" from phase p join step s on s.id = p.step_id where p.campaign_id = $1 and p.closed_at is not null order by s.stored desc, p.id limit 1`,
    [await measuredCampaign()],
  );
  if (!found) throw new Error("the measured campaign has no phase");
  return found;
}

let leftOut = 0;
async function anExclusion(): Promise<{ id: string; campaignId: string }> {
  const { stepId } = await aPhase();
  const { id } = await Exclusion.create({ stepId, idx: leftOut++ % 15, personId: (await buildPerson()).id, at: now, why: "Somebody leaned on the bench" });
  return { id, campaignId: await measuredCampaign() };
}

/** Fits made again beside those that a campaign began with; one at a time is being made. */
async function aFitRun(state: "waiting" | "ready"): Promise<{ id: string; campaignId: string }> {
  const campaignId = await measuredCampaign();
  await FitRun.update({ state: "cancelled", finishedAt: now }, { where: { campaignId, state: "waiting" } });
  const { settings, codeVersion } = await FitRun.findOne({ where: { campaignId, current: true }, rejectOnEmpty: true });
  return FitRun.create({ campaignId, settings, codeVersion, current: false, state, why: "To see what the settings do", createdBy: (await buildPerson()).id, createdAt: now });
}

/** A campaign about to be: a rig with a bottle, a sensor mounted there, a protocol. */
async function choice(): Promise<Prepared> {
  const rig = await buildRig();
  const sensor = await buildSensor();
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const { lotId } = await buildLoad({ rigId: rig.id, port: 1 });
  return { ids: { rigId: rig.id, sensorId: sensor.id, lotId, protocolVersionId: (await buildProtocolVersion()).id } };
}

/** A draft that can be queued; where the example acknowledges something, of a toxic liquid. */
async function draftToQueue(example: unknown): Promise<Prepared> {
  const rig = await buildRig();
  const sensor = await buildSensor();
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const liquid = await buildLiquid(JSON.stringify(example)?.includes("acknowledgements") ? { ghs: ["H301"] } : {});
  await buildLoad({ rigId: rig.id, port: 1, lotId: (await buildLot({ liquidId: liquid.id })).id });
  return { ...(await made(buildCampaign({ rigId: rig.id, sensorId: sensor.id }))), ids: { acknowledgements: [`toxic:${liquid.id}`] } };
}

async function anAlarm(): Promise<Prepared> {
  const rig = await buildRig();
  const { alarmId } = await inTransaction((transaction) =>
    openAlarm(transaction, { now, rigId: rig.id, source: "system", kind: "clock", text: "North bench: the clock is off", actionText: "Measuring goes on.", mail: false }),
  );
  return { params: { id: alarmId } };
}

async function aTask(): Promise<Prepared> {
  const rig = await buildRig();
  return made(OperatorTask.create({ rigId: rig.id, kind: "other", instruction: "Look at the hood", state: "open", createdAt: now }));
}

async function anInvitation(): Promise<{ id: string; token: string }> {
  const { token, hash: tokenHash } = newToken("invitation");
  const email = `guest-${next()}@longreed.example`;
  const { id } = await Invitation.create({ email, name: "R. Askelund", role: "viewer", tokenHash, invitedBy: (await buildPerson()).id, createdAt: now, expiresAt: hours(100) });
  return { id, token };
}

async function aReset(): Promise<Prepared> {
  const { token, hash: tokenHash } = newToken("reset");
  await PasswordReset.create({ personId: (await buildPerson()).id, tokenHash, createdAt: now, expiresAt: hours(100) });
  return { ids: { token }, headers: {} };
}

async function changingPassword(): Promise<Prepared> {
  const current = "the old long words";
  const person = await buildPerson({ passwordHash: await hash(current, { memoryCost: 1024, timeCost: 1 }) });
  await person.reload();
  return { ids: { current }, headers: { cookie: await cookieOf(person), origin: ORIGIN } };
}

async function anAccessToken(): Promise<{ id: string }> {
  const { hash: tokenHash, last4 } = newToken("person");
  return AccessToken.create({ personId: (await buildPerson()).id, name: "plots", scope: "read", tokenHash, last4, createdAt: now });
}

async function failedMail(): Promise<{ id: string }> {
  const person = await buildPerson();
  const letter = { kind: `letter:${next()}`, address: person.email, subject: "S", bodyText: "t", bodyHtml: "<p>t</p>" };
  return Notification.create({ ...letter, personId: person.id, state: "failed", tries: 10, error: "550 no such mailbox", createdAt: now });
}

async function aLine(): Promise<Prepared> {
  const rigId = (await buildRig()).id;
  const first = await buildCampaign({ rigId, state: "queued" });
  const second = await buildCampaign({ rigId, state: "queued", queuedAt: hours(1) });
  return { params: { id: second.id }, ids: { before: first.id } };
}

async function takenOver(): Promise<Prepared> {
  const { rigId } = await buildCampaign({ state: "running" });
  await takeOverRig({ by: await actor("operator"), now, rigId: String(rigId) });
  return { params: { id: String(rigId) } };
}

async function amendable(): Promise<Prepared> {
  const { campaignId, protocolVersionId } = await heldCampaign();
  const { protocolId } = await ProtocolVersion.findByPk(protocolVersionId, { rejectOnEmpty: true });
  const later = await buildProtocolVersion({ protocolId, version: 2, definition: aDefinition({ maxAttempts: 5 }) });
  return { params: { id: campaignId }, ids: { protocolVersionId: later.id } };
}

async function twoVersions(): Promise<Prepared> {
  const { id, name } = await buildProtocol();
  await buildProtocolVersion({ protocolId: id });
  const { id: versionId } = await buildProtocolVersion({ protocolId: id, version: 2 });
  return { params: { id, versionId }, ids: { name } };
}

async function aDraft(): Promise<Prepared> {
  return made(buildProtocol({ draft: { name: "Half-written", blocks: [] }, draftSavedAt: now }));
}

async function loading(): Promise<Prepared> {
  return { params: { id: (await buildRig()).id }, ids: { lotId: (await buildLot()).id } };
}

/** An agent that has a step of that kind in hand. */
async function atStep(kind: StepAnswer["kind"]): Promise<Prepared> {
  const bench = await Bench.make({ clock: "real" });
  await bench.hello();
  const step = (await bench.run((given) => given.kind === kind && given.role !== "find")) as StepAnswer;
  const { token, hash: tokenHash, last4 } = newToken("agent");
  await buildAgentToken({ rigId: bench.rig.id, tokenHash, last4 });
  return { params: { id: step.id }, ids: { stepId: step.id, lease: step.lease, clock: bench.clock.toISOString(), waitS: 0 }, headers: { authorization: `Bearer ${token}` } };
}

async function aBlockedTime(): Promise<{ id: string; rigId: string }> {
  const rigId = (await buildRig()).id;
  return { rigId, ...(await blockTime({ by: await actor("administrator"), now, rigId, from: hours(24), to: hours(25), why: "Service of the thermostat" })) };
}

async function withNote(): Promise<Prepared> {
  const { id: campaignId } = await buildCampaign({ state: "running" });
  await writeNote({ by: await actor("operator"), campaignId, text: "The scatter of cycle 4 comes from the open lid.", now });
  return { params: { id: campaignId } };
}

async function usedLiquid(): Promise<Prepared> {
  const lot = await buildLot();
  await buildCampaign({ slots: { sample: { port: 1, lotId: lot.id } } });
  return { params: { id: lot.liquidId } };
}

async function ownTokens(): Promise<Prepared> {
  const { person, cookie } = await signedInAs("researcher");
  await tokenOf(person.id, { name: "plots on the office computer" });
  return { headers: { cookie, origin: ORIGIN } };
}

async function aRigToken(): Promise<Prepared> {
  const { rigId, tokenId } = await agentToken();
  return { params: { id: rigId, tokenId } };
}

/** By call; the example that is to be sent tells what it needs. */
let uploads = 0;
/** A file of its own each time, as the example reads it. */
async function anUpload(example: unknown): Promise<Prepared> {
  const sensor = await buildSensor();
  const fields = { ...(example as Record<string, string | object> | undefined), sensorId: sensor.id };
  const line = ++uploads;
  const plain = `takenAt,medium,f0Hz,q\n2019-05-14T08:00:00Z,air,${2400 + line},1800\n`;
  const mapped = `Zeit;Medium;f (kHz);Q;T (K)\n14.05.2019 10:00:00;air;2,4${line};1800;293,15\n`;
  return { form: () => formOf({ file: "mapping" in fields ? mapped : plain, fields }) };
}

export const PREPARATIONS: Readonly<Record<string, (example: unknown) => Promise<Prepared>>> = {
  "POST /api/agent/hello": async () => ({ headers: { authorization: `Bearer ${(await agentToken()).token}` } }),
  "POST /api/agent/heartbeat": () => atStep("fill"),
  "POST /api/agent/steps/next": () => atStep("measure"),
  "POST /api/agent/steps/{id}/readings": () => atStep("measure"),
  "POST /api/agent/steps/{id}/finish": () => atStep("fill"),
  "GET /api/alarms": listOf(anAlarm),
  "GET /api/alarms/{id}": anAlarm,
  "POST /api/alarms/{id}/acknowledge": anAlarm,
  "POST /api/alarms/{id}/clear": anAlarm,
  "POST /api/alarms/{id}/shelve": anAlarm,
  "GET /api/audit": listOf(aBlockedTime),
  "POST /api/blocked-times/{id}/withdraw": () => made(aBlockedTime()),
  "GET /api/changes": async () => ({ query: "?forS=1" }),
  "GET /api/campaigns": listOf(measuredCampaign, aLine),
  "POST /api/campaigns": choice,
  "POST /api/campaigns/check": choice,
  "GET /api/campaigns/choices": listOf(choice),
  "GET /api/campaigns/overview": listOf(aLine),
  "GET /api/campaigns/strips": async () => ({ query: `?ids=${await measuredCampaign()}` }),
  "GET /api/campaigns/{id}": ofMeasured,
  "PATCH /api/campaigns/{id}": async () => ({ ...(await campaignIn("draft")), ids: { lotId: (await buildLot()).id } }),
  "DELETE /api/campaigns/{id}": () => campaignIn("draft"),
  "GET /api/campaigns/{id}/air-return": ofMeasured,
  "GET /api/campaigns/{id}/back-to-air": ofMeasured,
  "GET /api/campaigns/{id}/drift": ofMeasured,
  "GET /api/campaigns/{id}/events": ofMeasured,
  "GET /api/campaigns/{id}/notes": withNote,
  "GET /api/campaigns/{id}/phases": ofMeasured,
  "GET /api/campaigns/{id}/export": ofMeasured,
  "GET /api/campaigns/{id}/readings": ofMeasured,
  "GET /api/campaigns/{id}/series": ofMeasured,
  "GET /api/campaigns/{id}/stability": ofMeasured,
  "GET /api/campaigns/{id}/strip": ofMeasured,
  "GET /api/campaigns/{id}/sweep": ofMeasured,
  "GET /api/campaigns/{id}/exclusions": async () => ({ params: { id: (await anExclusion()).campaignId } }),
  "POST /api/campaigns/{id}/exclusions": async () => ({ params: { id: await measuredCampaign() }, ids: { phaseId: (await aPhase()).id } }),
  "POST /api/exclusions/{id}/take-back": () => made(anExclusion()),
  "GET /api/campaigns/{id}/fit-runs": ofMeasured,
  "POST /api/campaigns/{id}/fit-runs": async () => ({ params: { id: (await aFitRun("ready")).campaignId } }),
  "GET /api/fit-runs/{id}": () => made(aFitRun("ready")),
  "GET /api/fit-runs/{id}/compare": () => made(aFitRun("ready")),
  "POST /api/fit-runs/{id}/cancel": () => made(aFitRun("waiting")),
  "POST /api/fit-runs/{id}/make-current": () => made(aFitRun("ready")),
  "POST /api/campaigns/{id}/queue": draftToQueue,
  "POST /api/campaigns/{id}/move": aLine,
  "POST /api/campaigns/{id}/hold": () => campaignIn("running"),
  "POST /api/campaigns/{id}/resume": async () => ({ params: { id: (await heldCampaign()).campaignId } }),
  "POST /api/campaigns/{id}/stop": () => campaignIn("running"),
  "POST /api/campaigns/{id}/set-aside": () => campaignIn("running"),
  "POST /api/campaigns/{id}/amend": amendable,
  "POST /api/campaigns/{id}/notes": () => campaignIn("running"),
  "GET /api/find": async () => ({ query: "?q=wr" }),
  "GET /api/health": nothing,
  "GET /api/imports": listOf(buildImportRun),
  "POST /api/imports": anUpload,
  "GET /api/imports/{id}": () => made(buildImportRun()),
  "POST /api/imports/{id}/cancel": () => made(buildImportRun()),
  "GET /api/invitations": listOf(anInvitation),
  "POST /api/invitations": nothing,
  "POST /api/invitations/accept": async () => ({ ids: { token: (await anInvitation()).token }, headers: {} }),
  "POST /api/invitations/{id}/withdraw": () => made(anInvitation()),
  "GET /api/laboratory": nothing,
  "PATCH /api/laboratory": nothing,
  "GET /api/liquids": listOf(buildLoad),
  "POST /api/liquids": nothing,
  "GET /api/liquids/{id}": () => made(buildLiquid()),
  "PATCH /api/liquids/{id}": () => made(buildLiquid()),
  "GET /api/liquids/{id}/campaigns": usedLiquid,
  "GET /api/liquids/{id}/lots": async () => ({ params: { id: (await buildLot()).liquidId } }),
  "POST /api/liquids/{id}/lots": () => made(buildLiquid()),
  "GET /api/loads/{id}": () => made(buildLoad()),
  "GET /api/lots": listOf(buildLoad),
  "GET /api/lots/{id}": () => made(buildLot()),
  "PATCH /api/lots/{id}": () => made(buildLot()),
  "GET /api/me": nothing,
  "PATCH /api/me": nothing,
  "POST /api/me/password": changingPassword,
  "GET /api/mounts": listOf(buildMount),
  "GET /api/mounts/{id}": () => made(buildMount()),
  "POST /api/mounts/{id}/end": () => made(buildMount()),
  "GET /api/notifications": listOf(failedMail),
  "POST /api/notifications/{id}/send-again": () => made(failedMail()),
  "GET /api/openapi.json": nothing,
  "POST /api/password-resets": async () => ({ headers: {} }),
  "POST /api/password-resets/use": aReset,
  "GET /api/people": nothing,
  "POST /api/people": nothing,
  "GET /api/people/{id}": () => made(buildPerson()),
  "PATCH /api/people/{id}": () => made(buildPerson()),
  "POST /api/people/{id}/close": () => made(buildPerson()),
  "POST /api/people/{id}/open": () => made(buildPerson({ closedAt: now })),
  "GET /api/protocols": listOf(twoVersions),
  "POST /api/protocols": nothing,
  "POST /api/protocols/drafts": nothing,
  "POST /api/protocols/estimate": choice,
  "GET /api/protocols/{id}": twoVersions,
  "PATCH /api/protocols/{id}": aDraft,
  "DELETE /api/protocols/{id}": aDraft,
  "POST /api/protocols/{id}/bring-back": () => made(buildProtocol({ retiredAt: now })),
  "POST /api/protocols/{id}/retire": twoVersions,
  "GET /api/protocols/{id}/versions": twoVersions,
  "POST /api/protocols/{id}/versions": twoVersions,
  "GET /api/protocols/{id}/versions/{versionId}": twoVersions,
  "GET /api/rigs": listOf(measuredCampaign),
  "POST /api/rigs": nothing,
  "GET /api/rigs/contacts": listOf(measuredCampaign),
  "GET /api/rigs/timeline": listOf(aLine),
  "GET /api/rigs/{id}": () => made(buildRig()),
  "PATCH /api/rigs/{id}": () => made(buildRig()),
  "GET /api/rigs/{id}/blocked-times": async () => ({ params: { id: (await aBlockedTime()).rigId } }),
  "POST /api/rigs/{id}/blocked-times": () => made(buildRig()),
  "POST /api/rigs/{id}/give-back": takenOver,
  "GET /api/rigs/{id}/loads": async () => ({ params: { id: (await buildLoad()).rigId } }),
  "POST /api/rigs/{id}/loads": loading,
  "POST /api/rigs/{id}/take-over": async () => ({ params: { id: String((await buildCampaign({ state: "running" })).rigId) } }),
  "GET /api/rigs/{id}/tokens": aRigToken,
  "POST /api/rigs/{id}/tokens": () => made(buildRig()),
  "GET /api/rigs/{id}/tokens/{tokenId}": aRigToken,
  "POST /api/rigs/{id}/tokens/{tokenId}/withdraw": aRigToken,
  "POST /api/rigs/{id}/waste-emptied": () => made(buildRig()),
  "GET /api/sensors": listOf(buildMount),
  "POST /api/sensors": nothing,
  "GET /api/sensors/{id}": () => made(buildSensor()),
  "PATCH /api/sensors/{id}": () => made(buildSensor()),
  "GET /api/sensors/{id}/mounts": async () => ({ params: { id: (await buildMount()).sensorId } }),
  "POST /api/sensors/{id}/mounts": async () => ({ ...(await made(buildSensor())), ids: { rigId: (await buildRig()).id } }),
  "GET /api/tasks": listOf(aTask),
  "GET /api/tasks/{id}": aTask,
  "POST /api/tasks/{id}/answer": aTask,
  "GET /api/today": listOf(anAlarm, aTask, aLine, heldCampaign),
  "GET /api/tokens": ownTokens,
  "POST /api/tokens": nothing,
  "GET /api/tokens/{id}": () => made(anAccessToken()),
  "POST /api/tokens/{id}/withdraw": () => made(anAccessToken()),
};
