import { describe, expect, test } from "vitest";
import { repairsOf } from "@/app/(app)/campaigns/new/repairs";
import type { Choices } from "@/lib/campaigns/draft-schema";

const lot = (id: string, code: string, liquidName: string) => ({ id, code, liquidName, letter: "W", tint: 1 as const, expiresAt: null });
const rig = (id: string, name: string, ports: (string | null)[]) => ({
  id,
  name,
  timeZone: "Europe/Berlin",
  wasteCapacityMl: null,
  ahead: 0,
  ports: ports.map((lotId, i) => ({ number: i + 1, lotId, remainingMl: 100 })),
});
const choices: Choices = {
  versions: [{ id: "30", protocolId: "3", name: "Long phases", version: 2, savedAt: "2026-05-04T00:00:00Z", savedBy: null, slots: ["sample"] }],
  sensors: [{ id: "7", serial: "WR-2207", kind: "wire", rigId: "2" }],
  rigs: [rig("1", "North bench", ["50", "51", null]), rig("2", "Loft bench", [])],
  lots: [lot("50", "W-1", "Water"), lot("51", "W-2", "Water"), lot("52", "K-1", "Calder 12")],
};
const draft = (port: number, lotId: string) => ({ protocolVersionId: "30", sensorId: "7", rigId: "1", slots: { sample: { port, lotId } } });
const labels = (path: string, given = draft(1, "51")) => repairsOf({ path }, given, choices).map(({ label }) => label);

describe("a bottle", () => {
  test("of another lot of the liquid: take that lot, or the port where the lot stands, or load it", () =>
    expect(labels("slots.sample")).toEqual(["Use lot W-1", "Use port 2", "Load port 1"]));

  test("of another liquid, or none: only loading helps", () => {
    expect(labels("slots.sample", draft(1, "52"))).toEqual(["Load port 1"]);
    expect(labels("slots.sample", draft(3, "52"))).toEqual(["Load port 3"]);
  });

  test("with too little in it: load more", () => expect(labels("slots.sample", draft(1, "50"))).toEqual(["Load port 1"]));

  test("taking the lot changes the slot's lot and nothing else", () =>
    expect(repairsOf({ path: "slots.sample" }, draft(1, "51"), choices)[0]).toMatchObject({ do: "change", changes: { slots: { sample: { port: 1, lotId: "50" } } } }));

  test("a port that another slot has is not offered", () => {
    const taken = { ...draft(1, "51"), slots: { sample: { port: 1, lotId: "51" }, rinse: { port: 2, lotId: "51" } } };
    expect(labels("slots.sample", taken)).toEqual(["Use lot W-1", "Load port 1"]);
  });
});

test("a sensor elsewhere is mounted, or the rig taken where it is", () => expect(labels("sensorId")).toEqual(["Mount WR-2207", "Take Loft bench instead"]));

test("what the rig cannot do is changed in the protocol", () =>
  expect(repairsOf({ path: "blocks.0.sweep.driveV" }, draft(1, "50"), choices)).toEqual([{ do: "open", label: "Change the protocol", href: "/protocols/3/edit" }]));

test("an agent that has not reported is looked at on its rig's page", () => expect(labels("rigId")).toEqual(["Open the rig"]));
