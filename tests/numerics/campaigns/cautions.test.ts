import { describe, expect, test } from "vitest";
import { findCautions, SAFETY_NOTE, type CautionLiquid, type CautionSlot, type Circumstances } from "@/lib/campaigns/cautions";
import type { LiquidTrace } from "@/lib/campaigns/trace-liquids";

const quiet: LiquidTrace = { hottestC: new Map(), dried: new Set(), followed: [], complete: true };
const water: CautionLiquid = { id: "1", name: "Water", ghs: [], flashPointC: null, waste: null, notWith: [] };
const propanol: CautionLiquid = { id: "2", name: "2-Propanol", ghs: ["H225", "H319", "H336"], flashPointC: 12, waste: "solvents", notWith: [] };

const slot = (liquid: CautionLiquid, given: Partial<CautionSlot> = {}): CautionSlot => ({
  slot: liquid.name.toLowerCase(),
  port: Number(liquid.id),
  liquid,
  lot: { code: `L-${liquid.id}`, expiresAt: null },
  neededMl: 400,
  ...given,
});

const circumstances = (given: Partial<Circumstances> = {}): Circumstances => ({
  slots: [slot(water)],
  trace: quiet,
  plannedWasteMl: 400,
  wasteCapacityMl: 2000,
  wasteMl: 0,
  latestEnd: new Date("2026-06-01T00:00:00Z"),
  timeZone: "Europe/Berlin",
  ...given,
});

const codes = (given: Partial<Circumstances>) => findCautions(circumstances(given)).map(({ code }) => code);

test("water that fits into the waste container asks for nothing", () => {
  expect(codes({})).toEqual([]);
});

describe("hazards of the liquid", () => {
  test.each(["H224", "H225", "H226"])("%s is flammable", (ghs) => {
    expect(codes({ slots: [slot({ ...water, ghs: [ghs] })] })).toEqual(["flammable:1"]);
  });

  test.each(["H300", "H301", "H310", "H311", "H330", "H331", "H350", "H360FD", "H370", "H372"])("%s is dangerous to health", (ghs) => {
    expect(codes({ slots: [slot({ ...water, ghs: [ghs] })] })).toEqual(["toxic:1"]);
  });

  test.each(["H227", "H302", "H319", "H335", "H411"])("%s asks for nothing", (ghs) => {
    expect(codes({ slots: [slot({ ...water, ghs: [ghs] })] })).toEqual([]);
  });

  test("a liquid in two slots is one caution that names both ports and the whole volume", () => {
    const [caution, ...others] = findCautions(circumstances({ slots: [slot(propanol, { port: 2 }), slot(propanol, { slot: "rinse", port: 4 })] }));
    expect(others).toEqual([]);
    expect(caution.message).toBe(
      "2-Propanol is flammable. Flam. Liq. 2, H225: Highly flammable liquid and vapour. Flash point 12 °C. Ports 2 and 4, 800\u00a0mL in all, most of it unattended.",
    );
  });
});

describe("heating", () => {
  const mix = { ...water, flashPointC: 36 };
  const heatedTo = (temperatureC: number) => codes({ slots: [slot(mix)], trace: { ...quiet, hottestC: new Map([["water", temperatureC]]) } });

  test("begins to ask above the flash point less 5 °C, not at it", () => {
    expect(heatedTo(31)).toEqual([]);
    expect(heatedTo(31.1)).toEqual(["heat:1"]);
  });

  test("says how far from the flash point it is", () => {
    const messageAt = (temperatureC: number) =>
      findCautions(circumstances({ slots: [slot(mix)], trace: { ...quiet, hottestC: new Map([["water", temperatureC]]) } }))[0].message;
    expect(messageAt(35)).toContain("Water at 35 °C, 1 °C below its flash point of 36 °C");
    expect(messageAt(36)).toContain("at its flash point");
    expect(messageAt(40)).toContain("4 °C above its flash point");
  });

  test("an unknown flash point cannot be compared, but a flammable liquid says that it is unknown", () => {
    const [caution] = findCautions(circumstances({ slots: [slot({ ...propanol, flashPointC: null })], trace: { ...quiet, hottestC: new Map([["2-propanol", 60]]) } }));
    expect(caution.code).toBe("flammable:2");
    expect(caution.message).toContain("Its flash point is not recorded.");
  });
});

test("drying asks only where the residue is flammable", () => {
  const trace = { ...quiet, dried: new Set(["water", "2-propanol"]) };
  expect(codes({ slots: [slot(water), slot(propanol)], trace })).toEqual(["flammable:2", "dry:2"]);
});

describe("liquids not to be mixed", () => {
  const trace = { ...quiet, followed: [{ before: "water", after: "acid" }, { before: "acid", after: "water" }] };
  const acid = { ...water, id: "3", name: "Acid", notWith: [] as string[] };

  test.each([
    ["the first names the second by name", { ...water, notWith: ["acid"] }, acid],
    ["the second names the first by name", water, { ...acid, notWith: ["WATER "] }],
    ["by id", { ...water, notWith: ["3"] }, acid],
  ])("%s: one caution, whichever comes first", (_, one, other) => {
    expect(codes({ slots: [slot(one), slot(other)], trace })).toEqual(["mix:1-3"]);
  });

  test("marked but never in a row asks for nothing", () => {
    expect(codes({ slots: [slot({ ...water, notWith: ["Acid"] }), slot(acid)] })).toEqual([]);
  });
});

describe("waste", () => {
  test("may fill the container to the brim, with what is in it already", () => {
    expect(codes({ wasteMl: 1600 })).toEqual([]);
    expect(codes({ wasteMl: 1601 })).toEqual(["waste"]);
  });

  test("a container of unknown size is not judged", () => {
    expect(codes({ wasteCapacityMl: null, plannedWasteMl: 1e6 })).toEqual([]);
  });
});

test("a lot that expires before the latest end asks, one that lasts does not", () => {
  const lasting = slot(water, { lot: { code: "L-1", expiresAt: new Date("2026-06-01T00:00:01Z") } });
  const short = slot(water, { lot: { code: "L-1", expiresAt: new Date("2026-06-01T00:00:00Z") } });
  expect(codes({ slots: [lasting] })).toEqual([]);
  expect(codes({ slots: [short] })).toEqual(["expired:water"]);
});

test("loops that were not gone through are said, never passed over", () => {
  expect(codes({ trace: { ...quiet, complete: false } })).toEqual(["unchecked"]);
});

test("the note defers to local rules and says that a browser is no emergency stop", () => {
  expect(SAFETY_NOTE).toMatch(/safety officer decide/);
  expect(SAFETY_NOTE).toMatch(/not an emergency stop/);
});
