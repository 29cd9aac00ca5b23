import { expect, test } from "vitest";
import { bindSlots } from "@/lib/campaigns/bind-slots";
import type { Choices } from "@/lib/campaigns/draft-schema";

const lot = (id: string, liquidName: string): Choices["lots"][number] => ({ id, code: `L-${id}`, liquidName, letter: liquidName[0], tint: 1, expiresAt: null });
const lots = [lot("1", "Water"), lot("2", "Oil"), lot("3", "Brine")];
const rig = (...lotIds: (string | null)[]): Choices["rigs"][number] => ({
  id: "1",
  name: "Bench",
  timeZone: "UTC",
  wasteCapacityMl: null,
  ahead: 0,
  ports: lotIds.map((lotId, index) => ({ number: index + 1, lotId, remainingMl: 100 })),
});

test("a slot named after a liquid gets its bottle, wherever it stands; the others what is left in order", () => {
  expect(bindSlots(["sample", "water", "rinse"], rig("2", "3", "1"), lots, {})).toEqual({
    water: { port: 3, lotId: "1" },
    sample: { port: 1, lotId: "2" },
    rinse: { port: 2, lotId: "3" },
  });
});

test("what a person bound stays, and no port is given twice", () => {
  const bound = bindSlots(["sample", "water"], rig("1", "2"), lots, { sample: { port: 1, lotId: "3" } });
  expect(bound).toEqual({ sample: { port: 1, lotId: "3" }, water: { port: 2, lotId: "2" } });
});

test("a port that the new rig has not is let go", () => {
  expect(bindSlots(["sample"], rig("2"), lots, { sample: { port: 4, lotId: "1" } })).toEqual({ sample: { port: 1, lotId: "2" } });
});

test("without a bottle a slot stays open", () => {
  expect(bindSlots(["sample"], rig(null, null), lots, {})).toEqual({ sample: { port: null, lotId: "" } });
});
