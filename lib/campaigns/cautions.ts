import type { LiquidTrace } from "@/lib/campaigns/trace-liquids";
import { formatDay } from "@/lib/format-time";
import { formatNumber, formatVolume, listOf } from "@/lib/format";
import { flammableCodes, hazardStatement, toxicCodes } from "@/lib/liquids/ghs";

/** How far below the flash point heating asks for a word. Common practice; there is no source for the figure. */
export const FLASH_POINT_MARGIN_C = 5;

/** Said beside every list of cautions. */
export const SAFETY_NOTE =
  "Local safety rules and the laboratory's safety officer decide. Pause and Stop in a browser are not an emergency stop: use the one at the rig.";

export type CautionLiquid = { id: string; name: string; ghs: readonly string[]; flashPointC: number | null; waste: string | null; notWith: readonly string[] };

export type CautionSlot = {
  slot: string;
  port: number;
  liquid: CautionLiquid;
  lot: { code: string; expiresAt: Date | null };
  neededMl: number;
};

export type Circumstances = {
  slots: readonly CautionSlot[];
  trace: LiquidTrace;
  plannedWasteMl: number;
  /** Null where the rig has no container that anybody measured. */
  wasteCapacityMl: number | null;
  wasteMl: number;
  /** When the campaign is expected to end at the latest, and the rig's zone to say it in. */
  latestEnd: Date;
  timeZone: string;
};

/** The code stays the same while the reason does; the message is what the named person acknowledges, word for word. */
export type Caution = { code: string; title: string; what: string[]; where: string; message: string };

/** Everything about a campaign that needs a named person's word before it is queued. */
export function findCautions(given: Circumstances): Caution[] {
  const liquids = [...new Map(given.slots.map(({ liquid }) => [liquid.id, liquid])).values()];
  return [
    ...liquids.flatMap((liquid) => ofLiquid(liquid, given)),
    ...notToBeMixed(given),
    ...ofWaste(given),
    ...expired(given),
    ...(given.trace.complete ? [] : [unchecked()]),
  ];
}

function ofLiquid(liquid: CautionLiquid, { slots, trace }: Circumstances): Caution[] {
  const own = slots.filter((slot) => slot.liquid.id === liquid.id);
  const ports = `${own.length > 1 ? "Ports" : "Port"} ${listOf(own.map(({ port }) => String(port)))}`;
  const volume = own.reduce((sum, { neededMl }) => sum + neededMl, 0);
  const where = `${ports}, ${formatVolume(volume)} in all, most of it unattended.`;
  const flammable = flammableCodes(liquid.ghs);
  const toxic = toxicCodes(liquid.ghs);
  const flashPoint = liquid.flashPointC === null ? ["Its flash point is not recorded."] : [`Flash point ${formatNumber(liquid.flashPointC)} °C.`];
  const cautions: Caution[] = [];

  if (flammable.length > 0) cautions.push(caution(`flammable:${liquid.id}`, `${liquid.name} is flammable`, [...flammable.map(statement), ...flashPoint], where));
  if (toxic.length > 0) cautions.push(caution(`toxic:${liquid.id}`, `${liquid.name} is dangerous to health`, toxic.map(statement), where));

  const hottestC = Math.max(-Infinity, ...own.map(({ slot }) => trace.hottestC.get(slot) ?? -Infinity));
  if (liquid.flashPointC !== null && hottestC > liquid.flashPointC - FLASH_POINT_MARGIN_C) cautions.push(heated(liquid.name, liquid.id, liquid.flashPointC, hottestC));

  if (flammable.length > 0 && own.some(({ slot }) => trace.dried.has(slot)))
    cautions.push(
      caution(`dry:${liquid.id}`, "Drying a flammable residue with air", [`${liquid.name}, ${flammable.join(", ")}.`], "The cell is dried with air while what is left of it is still there. The vapour leaves with that air."),
    );
  return cautions;
}

function heated(name: string, id: string, flashPointC: number, hottestC: number): Caution {
  const distance = hottestC - flashPointC;
  const relation = distance > 0 ? `${formatNumber(distance)} °C above` : distance < 0 ? `${formatNumber(-distance)} °C below` : "at";
  return caution(
    `heat:${id}`,
    "Heating near the flash point",
    [`${name} at ${formatNumber(hottestC)} °C, ${relation} its flash point of ${formatNumber(flashPointC)} °C.`],
    `Longreed asks above ${formatNumber(flashPointC - FLASH_POINT_MARGIN_C)} °C, the flash point less ${FLASH_POINT_MARGIN_C} °C, as is common practice.`,
  );
}

function notToBeMixed({ slots, trace }: Circumstances): Caution[] {
  const bySlot = new Map(slots.map((slot) => [slot.slot, slot.liquid]));
  const found = new Map<string, Caution>();
  for (const { before, after } of trace.followed) {
    const [one, other] = [bySlot.get(before), bySlot.get(after)];
    if (!one || !other || one.id === other.id || !(names(one, other) || names(other, one))) continue;
    const code = `mix:${[one.id, other.id].sort((a, b) => Number(a) - Number(b)).join("-")}`;
    if (found.has(code)) continue;
    found.set(code, caution(code, `${one.name} and ${other.name} are not to be mixed`, [`${other.name} follows ${one.name} in the cell.`], "They meet in the cell, in the tubes and in the waste container, whatever is rinsed between them."));
  }
  return [...found.values()];
}

/** A liquid names what it must not meet by name or id. */
const names = (liquid: CautionLiquid, other: CautionLiquid): boolean =>
  liquid.notWith.some((entry) => entry === other.id || entry.trim().toLowerCase() === other.name.toLowerCase());

function ofWaste({ plannedWasteMl, wasteCapacityMl, wasteMl, slots }: Circumstances): Caution[] {
  if (wasteCapacityMl === null || wasteMl + plannedWasteMl <= wasteCapacityMl) return [];
  const compatible = [...new Set(slots.flatMap(({ liquid }) => liquid.waste ?? []))];
  return [
    caution(
      "waste",
      "More waste than the container holds",
      [`${formatVolume(plannedWasteMl)} into ${formatVolume(wasteCapacityMl)}.`, ...(compatible.length > 0 ? [`Compatible waste: ${listOf(compatible)}.`] : [])],
      `It holds ${formatVolume(wasteMl)} now. Somebody has to empty it in time; until then the campaign waits and fills nothing.`,
    ),
  ];
}

function expired({ slots, latestEnd, timeZone }: Circumstances): Caution[] {
  return slots.flatMap(({ slot, lot, liquid }) =>
    lot.expiresAt && lot.expiresAt <= latestEnd
      ? [
          caution(
            `expired:${slot}`,
            `Lot ${lot.code} of ${liquid.name} expires before the end`,
            [`It expires ${formatDay(lot.expiresAt, timeZone)}.`],
            `The campaign may need it until ${formatDay(latestEnd, timeZone)}. Density and viscosity of its certificate no longer hold after that.`,
          ),
        ]
      : [],
  );
}

const unchecked = (): Caution =>
  caution("unchecked", "The protocol's loops are too many to check", ["Longreed did not go through all of them."], "Look by hand which liquids are heated, dried and follow one another.");

function statement(code: string): string {
  const known = hazardStatement(code);
  return known ? `${known.hazardClass}, ${code}: ${known.text}.` : `${code}.`;
}

const caution = (code: string, title: string, what: string[], where: string): Caution => ({ code, title, what, where, message: [`${title}.`, ...what, where].join(" ") });
