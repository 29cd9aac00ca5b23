import { afterAll, describe, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { createLiquid } from "@/lib/liquids/create";
import { findLots, getLot } from "@/lib/liquids/lots";
import { findLiquids, getLiquid } from "@/lib/liquids/read";
import { recordLot, updateLot } from "@/lib/liquids/record-lot";
import { liquidBody, lotBody } from "@/lib/liquids/schema";
import { updateLiquid } from "@/lib/liquids/update";
import { auditedActions } from "../../factories/audit";
import { buildLiquid } from "../../factories/liquid";
import { buildLoad } from "../../factories/load";
import { buildLot } from "../../factories/lot";
import { hours, now } from "../../factories/now";
import { actor } from "../../factories/person";

afterAll(() => sequelize.close());

describe("createLiquid", () => {
  test("chooses a letter from the name that no other liquid has", async () => {
    const by = await actor("researcher");
    const first = await createLiquid({ by, now, name: "Zircon oil", model: "water" });
    const second = await createLiquid({ by, now, name: "Zinc brine", model: "water" });
    expect(first.letter).toBe("Z");
    expect(second.letter).toBe("B");
    expect(await auditedActions("liquid", first.id)).toEqual(["create"]);
  });

  test("a letter asked for that is taken is a conflict, and so is a name", async () => {
    const by = await actor("researcher");
    await createLiquid({ by, now, name: "Amber mix", letter: "A9", model: "water" });
    await expect(createLiquid({ by, now, name: "Azure mix", letter: "A9", model: "water" })).rejects.toMatchObject({ status: 409, code: "letter-taken" });
    await expect(createLiquid({ by, now, name: "Amber mix", model: "water" })).rejects.toMatchObject({ status: 409 });
  });

  test("two made at once get two letters", async () => {
    const by = await actor("researcher");
    const made = await Promise.all(["Quartz one", "Quartz two"].map((name) => createLiquid({ by, now, name, model: "water" })));
    expect(new Set(made.map(({ letter }) => letter)).size).toBe(2);
  });

  test("is refused to an operator", async () => {
    await expect(createLiquid({ by: await actor("operator"), now, name: "X", model: "water" })).rejects.toMatchObject({ status: 403 });
  });
});

test("a liquid shows what its hazard statements say, and its properties at 20 °C", async () => {
  const liquid = await buildLiquid({ model: "2-propanol", ghs: ["H225", "H319", "H336"], flashPointC: 12 });
  const shown = await getLiquid(liquid.id);
  expect(shown.hazards.statements[0]).toEqual({ code: "H225", hazardClass: "Flam. Liq. 2", text: "Highly flammable liquid and vapour" });
  expect(shown.at20C?.densityKgM3).toBeGreaterThan(784);
  expect(shown.at20C?.densityKgM3).toBeLessThan(786.5);
});

test("a table that does not reach 20 °C says nothing there", async () => {
  const propertyTable = [30, 40].map((temperatureC) => ({ temperatureC, densityKgM3: 900, viscosityMPaS: 5 }));
  const liquid = await buildLiquid({ model: "table", propertyTable });
  expect(await getLiquid(liquid.id)).toMatchObject({ at20C: null, range: { minC: 30, maxC: 40 } });
});

describe("the schema of a liquid", () => {
  const row = (temperatureC: number) => ({ temperatureC, densityKgM3: 900, viscosityMPaS: 5 });

  test.each([
    ["a mixture without its mass fraction", { name: "M", model: "ethanol-water" }, "massFraction"],
    ["a mass fraction of a pure liquid", { name: "M", model: "water", massFraction: 0.5 }, "massFraction"],
    ["a table with one row", { name: "M", model: "table", table: [row(20)] }, "table"],
    ["a table whose temperatures fall", { name: "M", model: "table", table: [row(20), row(30), row(25)] }, "table.2.temperatureC"],
    ["a temperature twice", { name: "M", model: "table", table: [row(20), row(20)] }, "table.1.temperatureC"],
    ["a hazard class in place of a statement", { name: "M", model: "water", hazards: { ghs: ["Flam. Liq. 2"] } }, "hazards.ghs.0"],
  ])("refuses %s and names the field", (_, body, path) => {
    const result = liquidBody.safeParse(body);
    expect(result.error?.issues.map((issue) => issue.path.join("."))).toContain(path);
  });

  test("takes a mixture and a rising table", () => {
    expect(liquidBody.safeParse({ name: "M", model: "glycerol-water", massFraction: 0.4 }).success).toBe(true);
    expect(liquidBody.safeParse({ name: "M", model: "table", table: [row(20), row(30)] }).success).toBe(true);
  });
});

describe("updateLiquid", () => {
  test("replaces the hazards whole and records what stood before", async () => {
    const liquid = await buildLiquid({ ghs: ["H225"], flashPointC: 12, waste: "solvents" });
    const changed = await updateLiquid({ by: await actor("researcher"), now, liquidId: liquid.id, hazards: { ghs: ["H226"] } });
    expect(changed.hazards).toMatchObject({ ghs: ["H226"], flashPointC: null, waste: null });
    expect(await auditedActions("liquid", liquid.id)).toEqual(["update"]);
  });

  test("a liquid that stands on a port is not retired", async () => {
    const liquid = await buildLiquid();
    await buildLoad({ lotId: (await buildLot({ liquidId: liquid.id })).id });
    await expect(updateLiquid({ by: await actor("researcher"), now, liquidId: liquid.id, retired: true })).rejects.toMatchObject({ status: 409 });
  });

  test("the letter of another liquid is a conflict", async () => {
    const [one, two] = [await buildLiquid(), await buildLiquid()];
    await expect(updateLiquid({ by: await actor("researcher"), now, liquidId: one.id, letter: two.letter })).rejects.toMatchObject({ status: 409 });
  });
});

describe("lots", () => {
  const point = { temperatureC: 20, densityKgM3: 998.2, uDensityKgM3: 0.02 };

  test("a lot keeps its certificate; its code stands once in its liquid", async () => {
    const by = await actor("researcher");
    const [liquid, other] = [await buildLiquid(), await buildLiquid()];
    const { id } = await recordLot({ by, now, liquidId: liquid.id, code: "K-1", receivedAt: now, expiresAt: hours(1000), certificate: [point] });
    expect(await getLot(id)).toMatchObject({ code: "K-1", liquidName: liquid.name, certificate: [point], ports: [], campaigns: 0 });
    expect(await auditedActions("lot", id)).toEqual(["create"]);
    await expect(recordLot({ by, now, liquidId: liquid.id, code: "K-1" })).rejects.toMatchObject({ status: 409 });
    await expect(recordLot({ by, now, liquidId: other.id, code: "K-1" })).resolves.toHaveProperty("id");
  });

  test("an operator records loads but no lots", async () => {
    await expect(recordLot({ by: await actor("operator"), now, liquidId: (await buildLiquid()).id, code: "K-2" })).rejects.toMatchObject({ status: 403 });
  });

  test("an expiry before the delivery is refused, also when only one of them changes", async () => {
    expect(lotBody.safeParse({ code: "K", receivedAt: "2026-05-02T00:00:00Z", expiresAt: "2026-05-01T00:00:00Z" }).success).toBe(false);
    const lot = await buildLot({ receivedAt: now });
    await expect(updateLot({ by: await actor("researcher"), now, lotId: lot.id, expiresAt: hours(-1) })).rejects.toMatchObject({ status: 422 });
  });

  test("a viscosity needs its uncertainty", () => {
    expect(lotBody.safeParse({ code: "K", certificate: [{ ...point, viscosityMPaS: 1 }] }).success).toBe(false);
  });

  test("the list finds a lot by what stands on its label and says where its bottle is", async () => {
    const lot = await buildLot({ code: "T3-0077" });
    const load = await buildLoad({ lotId: lot.id, port: 3, volumeMl: 700 });
    const { items } = await findLots({ limit: 10, search: "t3-00" });
    expect(items).toEqual([expect.objectContaining({ id: lot.id, ports: [expect.objectContaining({ rigId: load.rigId, port: 3, remainingMl: 700, fullMl: 700 })] })]);
  });
});

test("liquids are listed by name, page by page", async () => {
  const all = await findLiquids({ limit: 200, retired: "false" });
  const first = await findLiquids({ limit: 3, retired: "false" });
  const second = await findLiquids({ limit: 3, retired: "false", cursor: first.nextCursor! });
  expect([...first.items, ...second.items].map(({ id }) => id)).toEqual(all.items.slice(0, 6).map(({ id }) => id));
});
