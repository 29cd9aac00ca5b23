import { afterAll, describe, expect, test } from "vitest";
import { POST as estimateRoute } from "@/app/api/protocols/estimate/route";
import { GET as listRoute, POST as createRoute } from "@/app/api/protocols/route";
import { sequelize } from "@/lib/db";
import { createProtocol } from "@/lib/protocols/create";
import { estimateProtocol } from "@/lib/protocols/estimate";
import { findProtocols } from "@/lib/protocols/read";
import { retireProtocol } from "@/lib/protocols/retire";
import { protocolQuery, type ProtocolSort } from "@/lib/protocols/schema";
import { beginDraft } from "@/lib/protocols/save-draft";
import { buildCampaign } from "../../factories/campaign";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";
import { aDefinition, buildProtocol, buildProtocolVersion } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

describe("findProtocols", () => {
  const query = (given: Record<string, string>) => ({ ...protocolQuery.parse(given), now: hours(1000) });

  async function three(word: string) {
    const [b, a, c] = await Promise.all(["b", "a", "c"].map((letter) => buildProtocol({ name: `${word} ${letter}` })));
    await buildProtocolVersion({ protocolId: a.id, createdAt: hours(3) });
    const used = await buildProtocolVersion({ protocolId: b.id, createdAt: hours(1) });
    await buildProtocolVersion({ protocolId: b.id, version: 2, createdAt: hours(2) });
    await buildCampaign({ protocolVersionId: used.id, state: "finished" });
    await buildCampaign({ protocolVersionId: used.id });
    return { a, b, c };
  }

  test("a line counts versions and started campaigns, and tells what the newest version takes", async () => {
    await three("Counted");
    const { items } = await findProtocols(query({ search: "counted", sort: "name" }));
    expect(items.map(({ name, version, versions, campaigns }) => [name, version, versions, campaigns])).toEqual([
      ["Counted a", 1, 1, 0],
      ["Counted b", 2, 2, 1],
      ["Counted c", null, 0, 0],
    ]);
    expect(items[0].estimate?.wasteMl).toBe(120);
    expect(items[1].changedAt).toBe(hours(2).toISOString());
    expect(items[2].estimate).toBeNull();
  });

  test.each<[ProtocolSort, string]>([
    ["name", "abc"],
    ["-name", "cba"],
    ["changed", "cba"],
    ["-changed", "abc"],
    ["-versions", "bac"],
    ["-campaigns", "b"],
  ])("sorted by %s, a page at a time, nothing stands twice and nothing is missing", async (sort, order) => {
    const word = `Paged ${sort}.`;
    await three(word);
    const seen: string[] = [];
    let cursor: string | undefined;
    do {
      const page = await findProtocols(query({ search: word, sort, limit: "1", ...(cursor && { cursor }) }));
      seen.push(...page.items.map(({ name }) => name.at(-1) ?? ""));
      cursor = page.nextCursor ?? undefined;
    } while (cursor);
    expect(seen.join("").startsWith(order)).toBe(true);
    expect(seen.toSorted().join("")).toBe("abc");
  });

  test("retired ones and drafts are shown when asked for", async () => {
    const by = await actor("researcher");
    const { id } = await createProtocol({ by, now, definition: { ...aDefinition(), name: "Shown one" } });
    await beginDraft({ by, now, draft: { name: "Shown draft" } });
    await retireProtocol({ by, now, protocolId: id });
    const names = async (show: string) => (await findProtocols(query({ search: "shown", show }))).items.map(({ name }) => name);
    expect(await names("retired")).toEqual(["Shown one"]);
    expect(await names("drafts")).toEqual(["Shown draft"]);
    expect(await names("inUse")).toEqual(["Shown draft"]);
  });
});

describe("estimateProtocol", () => {
  test("tells seconds with their range, millilitres by slot, waste, people, and what each step takes", async () => {
    const estimate = await estimateProtocol({ by: await actor("viewer"), now, definition: aDefinition() });
    expect(estimate).toMatchObject({ mlPerSlot: { sample: 120 }, wasteMl: 120, repeats: 90, phases: 6, cycles: 3, people: { asks: 0, bottles: { sample: 1 } }, isExact: true });
    expect(estimate.seconds.low).toBeLessThan(estimate.seconds.likely);
    expect(estimate.seconds.likely).toBeLessThan(estimate.seconds.high);
    expect(estimate.blocks.fill).toEqual({ seconds: expect.closeTo(131, 5) as number, ml: 40 });
    expect(estimate.blocks.dry.seconds).toBeCloseTo(601, 5);
    expect(estimate.strip.isWhole).toBe(true);
    expect(estimate.strip.segments.filter(({ kind, find }) => kind === "liquid" && !find).map(({ medium, cycle }) => [medium, cycle])).toEqual([["sample", 1], ["sample", 2], ["sample", 3]]);
    expect((Date.parse(estimate.strip.to) - Date.parse(estimate.strip.from)) / 1000).toBeCloseTo(estimate.seconds.likely, 0);
  });

  test("a faster ring-down makes it shorter: the sensor counts", async () => {
    const by = await actor("researcher");
    const [slow, fast] = await Promise.all([{ nominalF0Hz: 1000, nominalQ: 4000 }, { nominalF0Hz: 8000, nominalQ: 1000 }].map((given) => buildSensor(given)));
    const seconds = async (sensorId: string) => (await estimateProtocol({ by, now, definition: aDefinition(), sensorId })).seconds.likely;
    expect(await seconds(fast.id)).toBeLessThan((await seconds(slow.id)) / 2);
  });

  test("names what the rig cannot do, with its path", async () => {
    const rig = await buildRig({ abilities: { minHz: 100, maxHz: 10_000, maxPoints: 41, maxDriveV: 0.04, ports: 4, kinds: ["measure", "fill", "drain"] } });
    const { problems } = await estimateProtocol({ by: await actor("researcher"), now, definition: aDefinition(), rigId: rig.id });
    const errors = problems.filter(({ severity }) => severity === "error").map(({ path }) => path);
    expect(errors).toEqual(expect.arrayContaining(["blocks.0.blocks.0.sweep.points", "blocks.0.blocks.0.sweep.driveV", "blocks.0.blocks.4"]));
  });

  test("a rig whose agent has not reported is said to be unchecked", async () => {
    const rig = await buildRig({ abilities: null });
    const { problems } = await estimateProtocol({ by: await actor("researcher"), now, definition: aDefinition(), rigId: rig.id });
    expect(problems.map(({ message }) => message).join()).toContain(rig.name);
  });

  test("a rig or sensor that does not exist is 422 and named", async () => {
    const question = { by: await actor("researcher"), now, definition: aDefinition(), rigId: "999999", sensorId: "999999" };
    await expect(estimateProtocol(question)).rejects.toMatchObject({ status: 422, members: { errors: [{ path: "rigId" }, { path: "sensorId" }] } });
  });
});

describe("over HTTP", () => {
  test("POST /api/protocols answers 201 with ids and version; a viewer gets 403; nobody 401", async () => {
    const { cookie } = await signedInAs("researcher");
    const body = { definition: { ...aDefinition(), name: "Sent over the wire" } };
    const response = await createRoute(request("POST", "/api/protocols", { cookie, body }), at());
    expect(response.status).toBe(201);
    expect(await response.json()).toEqual({ id: expect.any(String) as string, versionId: expect.any(String) as string, version: 1 });
    expect((await createRoute(request("POST", "/api/protocols", { cookie: (await signedInAs("viewer")).cookie, body }), at())).status).toBe(403);
    expect((await createRoute(request("POST", "/api/protocols", { body }), at())).status).toBe(401);
    expect((await listRoute(request("GET", "/api/protocols?search=wire", { cookie }), at())).status).toBe(200);
  });

  test.each([
    ["no definition", {}, "definition"],
    ["an unknown block", { definition: { ...aDefinition(), blocks: [{ kind: "shake" }] } }, "definition.blocks.0.kind"],
    ["a block nested in a wrong value", { definition: { ...aDefinition(), blocks: [{ kind: "repeat", times: 2, blocks: [{ kind: "wait" }] }] } }, "definition.blocks.0.blocks.0.seconds"],
    ["a misspelt field", { definition: { ...aDefinition(), reedout: "velocity" } }, "definition.reedout"],
  ])("%s is 400 and names the path", async (_, body, path) => {
    const { cookie } = await signedInAs("researcher");
    const response = await estimateRoute(request("POST", "/api/protocols/estimate", { cookie, body }), at());
    expect(response.status).toBe(400);
    const { errors } = (await response.json()) as { errors: { path: string }[] };
    expect(errors.map((error) => error.path)).toContain(path);
  });
});
