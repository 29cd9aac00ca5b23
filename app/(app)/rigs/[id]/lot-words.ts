import { formatDay } from "@/lib/format-time";
import type { LotAnswer } from "@/lib/liquids/schema";
import type { PortAnswer } from "@/lib/rigs/schema";

type Lot = Pick<LotAnswer, "id" | "code" | "liquidId" | "liquidName" | "expiresAt">;
type Bottle = Pick<NonNullable<PortAnswer["bottle"]>, "lotId" | "lotCode" | "liquidId" | "liquidName">;

const plain = (code: string): string => code.trim().toUpperCase();

/** The lot with this code; small and capital letters and spaces around do not matter. */
export const lotOf = <T extends Lot>(code: string, lots: readonly T[]): T | undefined => lots.find((lot) => plain(lot.code) === plain(code));

/** What the code on a bottle is, and how it stands to what is on the port. */
export function saidOfLot({ code, lots, bottle, timeZone }: { code: string; lots: readonly Lot[]; bottle: Bottle | null; timeZone: string }): string {
  if (plain(code) === "") return "As it stands on the label; typed, chosen or scanned";
  const lot = lotOf(code, lots);
  if (!lot) return `No lot ${plain(code)} is known; a lot is recorded under its liquid`;
  const until = lot.expiresAt ? `, good until ${formatDay(lot.expiresAt, timeZone)}` : "";
  return `${lot.liquidName}${until}.${besides(lot, bottle)}`;
}

function besides(lot: Lot, bottle: Bottle | null): string {
  if (!bottle) return "";
  if (lot.id === bottle.lotId) return " The lot that is on the port.";
  if (lot.liquidId === bottle.liquidId) return ` Not the lot on the port, ${bottle.lotCode}: the change goes into the log.`;
  return ` Another liquid than ${bottle.liquidName}, which is on the port.`;
}
