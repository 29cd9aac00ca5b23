import type { HoldReason } from "@/lib/campaigns/open-hold";
import { typicalViscosityMPaS } from "@/lib/liquids/property-model";
import { tintOf } from "@/lib/liquids/tint";
import type { RigAnswer } from "@/lib/rigs/schema";
import type { Campaign } from "@/models/campaign";
import type { AgentAbilities, PropertyRow } from "@/models/json";
import type { Rig } from "@/models/rig";

type PortJson = { number: number; remainingMl: number } & (
  | { loadId: null }
  | {
      loadId: string;
      lotId: string;
      lotCode: string;
      expiresAt: string | null;
      liquidId: string;
      liquidName: string;
      letter: string;
      model: string;
      massFraction: number | null;
      table: PropertyRow[] | null;
      loadedAt: string;
      fullMl: number;
    }
);

export type RigRow = {
  id: string;
  name: string;
  timeZone: string;
  clock: Rig["clock"];
  wasteCapacityMl: number | null;
  wasteMl: number;
  temperatureC: number | null;
  lastContactAt: Date | null;
  reportedClock: Date | null;
  clockOffsetMs: number | null;
  abilities: AgentAbilities | null;
  agentState: Rig["agentState"];
  agentMessage: string | null;
  createdAt: Date;
  retiredAt: Date | null;
  agentName: string | null;
  agentVersion: string | null;
  campaignId: string | null;
  campaignNumber: number | null;
  campaignName: string | null;
  campaignState: Exclude<Campaign["state"], "draft" | "queued"> | null;
  cursorText: string | null;
  sensorSerial: string | null;
  holds: HoldReason[];
  plannedEnd: Date | null;
  queued: number;
  ports: PortJson[];
  mounts: { id: string; position: number; sensorId: string; serial: string; since: string }[];
};

export function presentRig(rig: RigRow): RigAnswer {
  const { agentName, agentVersion, agentState, agentMessage, campaignId, campaignState } = rig;
  return {
    id: rig.id,
    name: rig.name,
    timeZone: rig.timeZone,
    clock: rig.clock,
    wasteCapacityMl: rig.wasteCapacityMl,
    wasteMl: rig.wasteMl,
    temperatureC: rig.temperatureC,
    lastContactAt: iso(rig.lastContactAt),
    reportedClock: iso(rig.reportedClock),
    clockOffsetS: rig.clockOffsetMs === null ? null : rig.clockOffsetMs / 1000,
    agent: agentName === null ? null : { name: agentName, version: agentVersion ?? "", state: agentState, message: agentMessage },
    abilities: rig.abilities,
    campaign:
      campaignId && campaignState
        ? {
            id: campaignId,
            number: rig.campaignNumber,
            name: rig.campaignName ?? "",
            state: campaignState,
            sensorSerial: rig.sensorSerial ?? "",
            cursorText: rig.cursorText,
            takenOver: rig.holds.includes("takeOver"),
            holds: rig.holds,
            plannedEnd: iso(rig.plannedEnd),
          }
        : null,
    queued: rig.queued,
    ports: rig.ports.map(presentPort),
    mounts: rig.mounts.map((mount) => ({ ...mount, since: new Date(mount.since).toISOString() })),
    createdAt: rig.createdAt.toISOString(),
    retiredAt: iso(rig.retiredAt),
  };
}

function presentPort(port: PortJson): RigAnswer["ports"][number] {
  const { number, remainingMl } = port;
  if (port.loadId === null) return { number, remainingMl, bottle: null };
  const { loadId, lotId, lotCode, expiresAt, liquidId, liquidName, letter, loadedAt, fullMl, model, massFraction, table } = port;
  return {
    number,
    remainingMl,
    bottle: {
      loadId,
      lotId,
      lotCode,
      expiresAt: expiresAt === null ? null : new Date(expiresAt).toISOString(),
      liquidId,
      liquidName,
      letter,
      tint: tintOf(typicalViscosityMPaS({ name: liquidName, model, massFraction, table })),
      fullMl: Math.max(fullMl, remainingMl),
      loadedAt: new Date(loadedAt).toISOString(),
    },
  };
}

const iso = (at: Date | null): string | null => at?.toISOString() ?? null;
