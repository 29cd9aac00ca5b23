import type { CreationAttributes } from "sequelize";
import type { Cursor } from "@/lib/protocol/types";
import { CampaignSlot } from "@/models/campaign-slot";
import { Campaign } from "@/models/campaign";
import { Load } from "@/models/load";
import { Port } from "@/models/port";
import { buildLoad } from "./load";
import { next, now } from "./now";
import { buildProtocolVersion } from "./protocol";
import { buildRig } from "./rig";
import { buildSensor } from "./sensor";

export const cursorAtStart: Cursor = {
  sequence: 0,
  cycle: 0,
  cyclesBegun: 0,
  path: [],
  detours: [],
  cell: { content: "air" },
  setPointC: null,
  cleanedAgain: {},
};

type Given = Partial<CreationAttributes<Campaign>> & {
  /** Slots with the port and lot they are bound to; by default `sample` on port 1, with a bottle put there if it has none. */
  slots?: Record<string, { port: number; lotId: string }>;
};

/** A draft that could be queued; with another `state`, a campaign that has come that far. */
export async function buildCampaign({ slots, ...given }: Given = {}): Promise<Campaign> {
  const rigId = given.rigId ?? (await buildRig()).id;
  const sensorId = given.sensorId ?? (await buildSensor()).id;
  const protocolVersionId = given.protocolVersionId ?? (await buildProtocolVersion()).id;
  const state = given.state ?? "draft";
  const campaign = await Campaign.create({
    name: `Campaign ${next()}`,
    createdAt: now,
    queuedAt: state === "draft" ? null : now,
    ...(state !== "draft" && state !== "queued" && { startedAt: now, startedClock: now, cursor: cursorAtStart, rigNumber: next() }),
    ...(["finished", "stopped", "failed"].includes(state) && { endedAt: now, endedClock: now }),
    ...given,
    state,
    rigId,
    sensorId,
    protocolVersionId,
  });
  const bound = slots ?? { sample: { port: 1, lotId: await lotOnPort(rigId, 1) } };
  await CampaignSlot.bulkCreate(Object.entries(bound).map(([slot, binding]) => ({ campaignId: campaign.id, slot, ...binding })));
  return campaign;
}

async function lotOnPort(rigId: string, number: number): Promise<string> {
  const port = await Port.findOne({ where: { rigId, number } });
  const load = port?.loadId ? await Load.findByPk(port.loadId) : null;
  return (load ?? (await buildLoad({ rigId, port: number }))).lotId;
}
