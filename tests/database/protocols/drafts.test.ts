import { afterAll, describe, expect, test } from "vitest";
import { row, sequelize } from "@/lib/db";
import { addVersion } from "@/lib/protocols/add-version";
import { createProtocol } from "@/lib/protocols/create";
import { getProtocol } from "@/lib/protocols/read";
import { bringBackProtocol, retireProtocol } from "@/lib/protocols/retire";
import { beginDraft, changeProtocol, deleteDraft } from "@/lib/protocols/save-draft";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { aDefinition, buildProtocol, buildProtocolVersion } from "../../factories/protocol";

afterAll(() => sequelize.close());

let made = 0;
const name = () => `Drafted ${++made}`;

describe("beginDraft", () => {
  test("keeps what is half-written, and is audited", async () => {
    const by = await actor("researcher");
    const draft = { name: name(), blocks: [{ kind: "fill", slot: "", volumeMl: "4o" }] };
    const saved = await beginDraft({ by, now, draft });
    expect(await getProtocol(saved.id)).toMatchObject({ name: draft.name, draft, draftSavedAt: now.toISOString(), versions: [] });
    expect(await auditedActions("protocol", saved.id)).toEqual(["begin draft"]);
  });

  test("a name that is taken is numbered, and one without a name is called untitled", async () => {
    const by = await actor("researcher");
    const taken = name();
    await beginDraft({ by, now, draft: { name: taken } });
    expect((await beginDraft({ by, now, draft: { name: taken.toUpperCase() } })).name).toBe(`${taken.toUpperCase()} 2`);
    expect((await beginDraft({ by, now, draft: { name: 5 } })).name).toBe("Untitled");
    expect((await beginDraft({ by, now, draft: {} })).name).toBe("Untitled 2");
  });

  test("is refused to an operator", async () => {
    await expect(beginDraft({ by: await actor("operator"), now, draft: {} })).rejects.toMatchObject({ status: 403 });
  });
});

describe("changeProtocol", () => {
  test("saves the draft of the next version, audited once however often it is saved", async () => {
    const by = await actor("researcher");
    const { id: protocolId } = await createProtocol({ by, now, definition: { ...aDefinition(), name: name() } });
    await changeProtocol({ by, now: hours(1), protocolId, draft: { blocks: 1 } });
    const saved = await changeProtocol({ by, now: hours(2), protocolId, draft: { blocks: 2 }, draftBasedOn: hours(1) });
    expect(saved.draftSavedAt).toBe(hours(2).toISOString());
    expect(await getProtocol(protocolId)).toMatchObject({ draft: { blocks: 2 }, versions: [{ version: 1 }] });
    expect(await auditedActions("protocol", protocolId)).toEqual(["create", "begin draft"]);
  });

  test("a draft that somebody saved since is not written over", async () => {
    const by = await actor("researcher");
    const { id: protocolId } = await beginDraft({ by, now, draft: { name: name() } });
    await changeProtocol({ by: await actor("researcher"), now: hours(1), protocolId, draft: { theirs: true }, draftBasedOn: now });
    await expect(changeProtocol({ by, now: hours(2), protocolId, draft: { mine: true }, draftBasedOn: now })).rejects.toMatchObject({ status: 409, code: "draft-changed" });
    await expect(changeProtocol({ by, now: hours(2), protocolId, draft: { mine: true }, draftBasedOn: null })).rejects.toMatchObject({ status: 409 });
    expect((await getProtocol(protocolId)).draft).toEqual({ theirs: true });
  });

  test("a draft that became a version meanwhile is not brought back by a late save", async () => {
    const by = await actor("researcher");
    const { id: protocolId, draftSavedAt } = await beginDraft({ by, now, draft: {} });
    await addVersion({ by, now: hours(1), protocolId, definition: { ...aDefinition(), name: name() } });
    await expect(changeProtocol({ by, now: hours(2), protocolId, draft: { late: true }, draftBasedOn: new Date(String(draftSavedAt)) })).rejects.toMatchObject({ status: 409 });
    expect(await getProtocol(protocolId)).toMatchObject({ draft: null, versions: [{ version: 1 }] });
  });

  test("a protocol without a version is called what its draft says; one with versions keeps its name", async () => {
    const by = await actor("researcher");
    const [first, second] = [name(), name()];
    const { id } = await beginDraft({ by, now, draft: { name: first } });
    expect((await changeProtocol({ by, now, protocolId: id, draft: { name: second } })).name).toBe(second);
    const saved = await createProtocol({ by, now, definition: { ...aDefinition(), name: first } });
    expect((await changeProtocol({ by, now, protocolId: saved.id, draft: { name: name() } })).name).toBe(first);
  });

  test("a rename is audited with both names; a name that is taken is a conflict", async () => {
    const by = await actor("researcher");
    const [one, other] = [await buildProtocol(), await buildProtocol()];
    const fresh = name();
    await changeProtocol({ by, now, protocolId: one.id, name: fresh });
    expect(await row("select detail from audit_event where entity = 'protocol' and entity_id = $1", [one.id])).toEqual({ detail: { before: one.name, after: fresh } });
    await expect(changeProtocol({ by, now, protocolId: one.id, name: other.name })).rejects.toMatchObject({ status: 409, code: "already-there" });
  });

  test("null throws the draft away, but not the only thing there is", async () => {
    const by = await actor("researcher");
    const { protocolId } = await buildProtocolVersion();
    await changeProtocol({ by, now, protocolId, draft: { a: 1 } });
    await changeProtocol({ by, now, protocolId, draft: null });
    expect(await row("select draft is null as gone, draft_saved_at as at from protocol where id = $1", [protocolId])).toEqual({ gone: true, at: null });
    expect(await auditedActions("protocol", protocolId)).toEqual(["begin draft", "throw draft away"]);
    const { id } = await beginDraft({ by, now, draft: {} });
    await expect(changeProtocol({ by, now, protocolId: id, draft: null })).rejects.toMatchObject({ status: 409, code: "only-draft" });
  });

  test("is refused to a viewer", async () => {
    await expect(changeProtocol({ by: await actor("viewer"), now, protocolId: (await buildProtocol()).id, draft: {} })).rejects.toMatchObject({ status: 403 });
  });
});

describe("deleteDraft", () => {
  test("takes a protocol without versions away; its audit events stay", async () => {
    const by = await actor("researcher");
    const { id: protocolId } = await beginDraft({ by, now, draft: {} });
    await deleteDraft({ by, now, protocolId });
    await expect(getProtocol(protocolId)).rejects.toMatchObject({ status: 404 });
    expect(await auditedActions("protocol", protocolId)).toEqual(["begin draft", "delete draft"]);
  });

  test("versions are kept", async () => {
    const { protocolId } = await buildProtocolVersion();
    await expect(deleteDraft({ by: await actor("administrator"), now, protocolId })).rejects.toMatchObject({ status: 409, code: "has-versions" });
    await expect(deleteDraft({ by: await actor("operator"), now, protocolId })).rejects.toMatchObject({ status: 403 });
  });
});

describe("retireProtocol", () => {
  test.each(["queued", "running", "held"] as const)("is refused while a campaign is %s", async (state) => {
    const version = await buildProtocolVersion();
    await buildCampaign({ protocolVersionId: version.id, state });
    await expect(retireProtocol({ by: await actor("researcher"), now, protocolId: version.protocolId })).rejects.toMatchObject({ status: 409, code: "needed" });
  });

  test("frees its name, is audited, and comes back unless the name is taken", async () => {
    const by = await actor("researcher");
    const definition = { ...aDefinition(), name: name() };
    const { id: protocolId, versionId } = await createProtocol({ by, now, definition });
    await buildCampaign({ protocolVersionId: versionId, state: "finished" });
    await retireProtocol({ by, now, protocolId });
    await retireProtocol({ by, now, protocolId });
    const { id: successor } = await createProtocol({ by, now, definition });
    await expect(bringBackProtocol({ by, now, protocolId })).rejects.toMatchObject({ status: 409 });
    await retireProtocol({ by, now, protocolId: successor });
    await bringBackProtocol({ by, now, protocolId });
    expect((await getProtocol(protocolId)).retiredAt).toBeNull();
    expect(await auditedActions("protocol", protocolId)).toEqual(["create", "retire", "bring back"]);
  });

  test("is refused to an operator", async () => {
    await expect(retireProtocol({ by: await actor("operator"), now, protocolId: (await buildProtocol()).id })).rejects.toMatchObject({ status: 403 });
  });
});
