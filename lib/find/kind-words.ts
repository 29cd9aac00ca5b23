import type { FoundKind } from "@/lib/find/schema";

/** How a kind is called on the screen, and the list that can be searched for it. */
export const KIND_WORDS: Record<FoundKind, { one: string; many: string; list: string }> = {
  campaign: { one: "campaign", many: "Campaigns", list: "/campaigns" },
  sensor: { one: "sensor", many: "Sensors", list: "/sensors" },
  liquid: { one: "liquid", many: "Liquids", list: "/liquids" },
  lot: { one: "lot", many: "Lots", list: "/liquids" },
  rig: { one: "rig", many: "Rigs", list: "/rigs" },
  protocol: { one: "protocol", many: "Protocols", list: "/protocols" },
};
