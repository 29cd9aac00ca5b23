import { campaignCode } from "@/lib/campaigns/code";

/** Kinds of things as a person says them, where that is not the name in the log. */
const WORDS: Readonly<Record<string, string>> = { agentToken: "agent token", maintenanceWindow: "blocked time", notification: "mail", setting: "settings of the" };

const PAGES: Readonly<Record<string, string>> = { rig: "rigs", sensor: "sensors", liquid: "liquids", protocol: "protocols", alarm: "alarms" };

export const entityInWords = (entity: string): string => WORDS[entity] ?? entity;

/** The page that shows what an event is about; undefined where there is none. */
export function pageOfEntity(entity: string, entityId: string): string | undefined {
  if (entity === "campaign") return `/campaigns/${campaignCode(entityId)}`;
  return PAGES[entity] && `/${PAGES[entity]}/${entityId}`;
}
