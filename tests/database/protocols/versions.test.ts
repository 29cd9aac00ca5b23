import { afterAll, describe, expect, test } from "vitest";
import { change, sequelize } from "@/lib/db";
import type { DefinitionInput } from "@/lib/protocol/schema";
import { addVersion } from "@/lib/protocols/add-version";
import { createProtocol } from "@/lib/protocols/create";
import { PROTOCOL_EXAMPLES } from "@/lib/protocols/examples";
import { findVersions, getProtocol, getVersion } from "@/lib/protocols/read";
import { auditedActions } from "../../factories/audit";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { aDefinition, buildProtocol } from "../../factories/protocol";

afterAll(() => sequelize.close());

let made = 0;
const named = (given: Partial<DefinitionInput> = {}): DefinitionInput => ({ ...aDefinition(), name: `Written ${++made}`, ...given });
const withoutIds = (): DefinitionInput => ({ ...named(), blocks: [{ kind: "repeat", times: 2, blocks: [{ kind: "drain" }] }], limits: [{ kind: "silence", afterS: 60, does: ["mail"] }] });

describe("createProtocol", () => {
  test("saves version 1, keeps ids that are given, and is audited", async () => {
    const by = await actor("researcher");
    const definition = named();
    const saved = await createProtocol({ by, now, definition });
    expect(saved.version).toBe(1);
    const version = await getVersion({ protocolId: saved.id, versionId: saved.versionId });
    expect(version).toMatchObject({ version: 1, savedBy: by.name, campaigns: 0, protocolName: definition.name });
    expect(version.definition).toEqual(definition);
    expect(await auditedActions("protocol", saved.id)).toEqual(["create"]);
  });

  test("makes the ids that are absent, each another", async () => {
    const { id, versionId } = await createProtocol({ by: await actor("researcher"), now, definition: withoutIds() });
    const { definition } = await getVersion({ protocolId: id, versionId });
    const [loop] = definition.blocks;
    const ids = [loop.id, ...("blocks" in loop ? loop.blocks.map((block) => block.id) : []), ...definition.limits.map((limit) => limit.id)];
    expect(ids.every((one) => /^[0-9a-f]{10}$/.test(one))).toBe(true);
    expect(new Set(ids).size).toBe(3);
  });

  test("is refused to an operator", async () => {
    await expect(createProtocol({ by: await actor("operator"), now, definition: named() })).rejects.toMatchObject({ status: 403 });
  });

  test("a broken rule is 400 and names its path", async () => {
    const definition = named({ blocks: [{ kind: "measure", medium: "each", repeats: 0, sweep: { centre: "track", span: { hz: 3 }, points: 5, dwell: { s: 1 }, driveV: 1 } }] });
    const refusal = createProtocol({ by: await actor("researcher"), now, definition });
    await expect(refusal).rejects.toMatchObject({
      status: 400,
      members: { errors: expect.arrayContaining([expect.objectContaining({ path: "definition.blocks.0.repeats" }), expect.objectContaining({ path: "definition.blocks.0.sweep.points" })]) as unknown },
    });
  });

  test("two protocols in use have two names, whatever their case", async () => {
    const by = await actor("researcher");
    const definition = named();
    await createProtocol({ by, now, definition });
    await expect(createProtocol({ by, now, definition: { ...definition, name: definition.name.toUpperCase() } })).rejects.toMatchObject({ status: 409, code: "already-there" });
  });

  test.each(PROTOCOL_EXAMPLES.map(({ definition }) => [definition.name, definition]))("takes the example %s", async (_, definition) => {
    await expect(createProtocol({ by: await actor("researcher"), now, definition })).resolves.toMatchObject({ version: 1 });
  });
});

describe("addVersion", () => {
  test("counts on, keeps ids, leaves the version before as it was, takes the new name and is done with the draft", async () => {
    const by = await actor("researcher");
    const first = await createProtocol({ by, now, definition: withoutIds() });
    const { definition: before } = await getVersion({ protocolId: first.id, versionId: first.versionId });
    await change("update protocol set draft = '{}', draft_saved_at = $2 where id = $1", [first.id, now]);

    const second = await addVersion({ by, now: hours(1), protocolId: first.id, definition: { ...before, name: `${before.name} anew`, maxAttempts: 7 }, note: "More patience" });
    expect(second).toMatchObject({ id: first.id, version: 2 });
    const after = await getVersion({ protocolId: first.id, versionId: second.versionId });
    expect(after).toMatchObject({ note: "More patience", definition: { maxAttempts: 7, blocks: before.blocks, limits: before.limits } });
    expect((await getVersion({ protocolId: first.id, versionId: first.versionId })).definition).toEqual(before);
    expect(await getProtocol(first.id)).toMatchObject({ name: `${before.name} anew`, draft: null, draftSavedAt: null });
    expect(await auditedActions("protocol", first.id)).toEqual(["create", "add version"]);
    expect((await findVersions({ protocolId: first.id, limit: 10 })).items.map(({ version }) => version)).toEqual([2, 1]);
  });

  test("two saved at once become two versions", async () => {
    const by = await actor("researcher");
    const definition = named();
    const { id: protocolId } = await createProtocol({ by, now, definition });
    const saved = await Promise.all([1, 2, 3].map(() => addVersion({ by, now, protocolId, definition })));
    expect(saved.map(({ version }) => version).toSorted()).toEqual([2, 3, 4]);
  });

  test("written from a version that is no longer the newest is a conflict, and nothing is saved", async () => {
    const by = await actor("researcher");
    const definition = named();
    const { id: protocolId } = await createProtocol({ by, now, definition });
    await addVersion({ by, now, protocolId, definition, basedOn: 1 });
    await expect(addVersion({ by, now, protocolId, definition, basedOn: 1 })).rejects.toMatchObject({ status: 409, code: "newer-version", members: { newest: 2 } });
    expect((await getProtocol(protocolId)).versions).toHaveLength(2);
  });

  test("a name that another protocol has is a conflict, and no version is left behind", async () => {
    const by = await actor("researcher");
    const [one, other] = [named(), named()];
    await createProtocol({ by, now, definition: one });
    const { id: protocolId } = await createProtocol({ by, now, definition: other });
    await expect(addVersion({ by, now, protocolId, definition: { ...other, name: one.name } })).rejects.toMatchObject({ status: 409, code: "already-there" });
    expect((await getProtocol(protocolId)).versions).toHaveLength(1);
  });

  test("is refused to a viewer, of a retired protocol, and of one that does not exist", async () => {
    const by = await actor("researcher");
    const retired = await buildProtocol({ retiredAt: now });
    await expect(addVersion({ by: await actor("viewer"), now, protocolId: retired.id, definition: named() })).rejects.toMatchObject({ status: 403 });
    await expect(addVersion({ by, now, protocolId: retired.id, definition: named() })).rejects.toMatchObject({ status: 409 });
    await expect(addVersion({ by, now, protocolId: "999999", definition: named() })).rejects.toMatchObject({ status: 404 });
  });
});

test("the database itself refuses to change or delete a saved version", async () => {
  const { versionId } = await createProtocol({ by: await actor("researcher"), now, definition: named() });
  await expect(change("update protocol_version set definition = '{}' where id = $1", [versionId])).rejects.toThrow();
  await expect(change("update protocol_version set note = 'better' where id = $1", [versionId])).rejects.toThrow();
  await expect(change("delete from protocol_version where id = $1", [versionId])).rejects.toThrow();
});

test("a version is read under its own protocol only", async () => {
  const by = await actor("researcher");
  const one = await createProtocol({ by, now, definition: named() });
  const other = await createProtocol({ by, now, definition: named() });
  await expect(getVersion({ protocolId: other.id, versionId: one.versionId })).rejects.toMatchObject({ status: 404 });
});
