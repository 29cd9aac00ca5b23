import { afterAll, describe, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { createRig } from "@/lib/rigs/create";
import { findRigs, getRig } from "@/lib/rigs/read";
import { rigBody } from "@/lib/rigs/schema";
import { updateRig } from "@/lib/rigs/update";
import { auditedActions } from "../../factories/audit";
import { buildCampaign } from "../../factories/campaign";
import { buildLoad } from "../../factories/load";
import { buildMount } from "../../factories/mount";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

const given = { timeZone: "Europe/Berlin", ports: 3 };

describe("createRig", () => {
  test.each(["viewer", "operator", "researcher"] as const)("is refused to a %s", async (role) => {
    const by = await actor(role);
    await expect(createRig({ by, now, name: "Bench", ...given })).rejects.toMatchObject({ status: 403 });
  });

  test("makes the rig with one empty port for each number and says who did it", async () => {
    const by = await actor("administrator");
    const { id } = await createRig({ by, now, name: "North bench", ...given });
    const rig = await getRig(id);
    expect(rig.ports).toEqual([1, 2, 3].map((number) => ({ number, remainingMl: 0, bottle: null })));
    expect(rig).toMatchObject({ name: "North bench", clock: "real", campaign: null, agent: null, retiredAt: null });
    expect(await auditedActions("rig", id)).toEqual(["create"]);
  });

  test("refuses a name that another rig has", async () => {
    const by = await actor("administrator");
    await createRig({ by, now, name: "Twice", ...given });
    await expect(createRig({ by, now, name: "Twice", ...given })).rejects.toMatchObject({ status: 409 });
  });

  test.each([
    ["a time zone that does not exist", { name: "A", timeZone: "Mars/Olympus", ports: 1 }],
    ["a misspelt field", { name: "A", ...given, prots: 2 }],
    ["an empty name", { name: "  ", ...given }],
    ["half a port", { name: "A", timeZone: "UTC", ports: 1.5 }],
  ])("its schema refuses %s", (_, body) => {
    expect(rigBody.safeParse(body).success).toBe(false);
  });
});

describe("updateRig", () => {
  test("adds ports, and takes away only those that are empty", async () => {
    const by = await actor("administrator");
    const rig = await buildRig({ ports: 2 });
    await buildLoad({ rigId: rig.id, port: 2 });
    expect((await updateRig({ by, now, rigId: rig.id, ports: 3 })).ports).toHaveLength(3);
    expect((await updateRig({ by, now, rigId: rig.id, ports: 2 })).ports).toHaveLength(2);
    await expect(updateRig({ by, now, rigId: rig.id, ports: 1 })).rejects.toMatchObject({ status: 409 });
  });

  test("keeps time zone and rig while a campaign is open on it", async () => {
    const by = await actor("administrator");
    const campaign = await buildCampaign({ state: "queued" });
    const rigId = campaign.rigId!;
    await expect(updateRig({ by, now, rigId, timeZone: "UTC" })).rejects.toMatchObject({ status: 409 });
    await expect(updateRig({ by, now, rigId, retired: true })).rejects.toMatchObject({ status: 409 });
    await expect(updateRig({ by, now, rigId, name: "Renamed all the same" })).resolves.toMatchObject({ name: "Renamed all the same" });
  });

  test("what changes nothing leaves no audit event", async () => {
    const by = await actor("administrator");
    const rig = await buildRig();
    await updateRig({ by, now, rigId: rig.id, name: rig.name });
    expect(await auditedActions("rig", rig.id)).toEqual([]);
  });

  test("there is no such rig: 404", async () => {
    await expect(updateRig({ by: await actor("administrator"), now, rigId: "999999", name: "x" })).rejects.toMatchObject({ status: 404 });
  });
});

describe("findRigs", () => {
  test("pages through all rigs by name, each once, whatever the page size, and leaves retired ones out", async () => {
    await buildRig({ name: "Zz retired", retiredAt: now });
    const all = await findRigs({ limit: 200, retired: "false" });
    const names: string[] = [];
    let cursor: string | undefined;
    do {
      const page = await findRigs({ limit: 2, cursor, retired: "false" });
      names.push(...page.items.map(({ name }) => name));
      cursor = page.nextCursor ?? undefined;
    } while (cursor);
    expect(names).toEqual(all.items.map(({ name }) => name));
    expect(names).not.toContain("Zz retired");
    expect((await findRigs({ limit: 200, retired: "true" })).items.map(({ name }) => name)).toContain("Zz retired");
  });

  test("shows bottles, mounts and the campaign on the rig", async () => {
    const campaign = await buildCampaign({ state: "running" });
    const mount = await buildMount({ rigId: campaign.rigId!, sensorId: campaign.sensorId! });
    const rig = await getRig(campaign.rigId!);
    expect(rig.campaign).toMatchObject({ id: campaign.id, state: "running", takenOver: false });
    expect(rig.mounts).toEqual([expect.objectContaining({ id: mount.id, position: 1 })]);
    expect(rig.ports[0]).toMatchObject({ number: 1, remainingMl: 1000, bottle: { fullMl: 1000 } });
  });
});
