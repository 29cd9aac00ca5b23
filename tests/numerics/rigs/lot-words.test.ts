import { expect, test } from "vitest";
import { lotOf, saidOfLot } from "@/app/(app)/rigs/[id]/lot-words";

const lots = [
  { id: "1", code: "CA-12-0388", liquidId: "7", liquidName: "Calder 12", expiresAt: null },
  { id: "2", code: "CA-12-0419", liquidId: "7", liquidName: "Calder 12", expiresAt: "2026-11-30T22:59:59Z" },
  { id: "3", code: "W-9", liquidId: "8", liquidName: "Water", expiresAt: null },
];
const bottle = { lotId: "1", lotCode: "CA-12-0388", liquidId: "7", liquidName: "Calder 12" };
const said = (code: string, on: typeof bottle | null = bottle) => saidOfLot({ code, lots, bottle: on, timeZone: "Europe/Berlin" });

test("a code is known in small letters and with spaces around it, and only whole", () => {
  expect(lotOf(" ca-12-0419 ", lots)?.id).toBe("2");
  expect(lotOf("CA-12", lots)).toBeUndefined();
});

test.each([
  ["", bottle, "As it stands on the label; typed, chosen or scanned"],
  ["CA-12-0388", bottle, "Calder 12. The lot that is on the port."],
  ["CA-12-0419", bottle, "Calder 12, good until Mon 30 Nov 2026. Not the lot on the port, CA-12-0388: the change goes into the log."],
  ["W-9", bottle, "Water. Another liquid than Calder 12, which is on the port."],
  ["W-9", null, "Water."],
  ["xy-1", bottle, "No lot XY-1 is known; a lot is recorded under its liquid"],
])("“%s” is answered with what it is", (code, on, words) => expect(said(code, on)).toBe(words));
