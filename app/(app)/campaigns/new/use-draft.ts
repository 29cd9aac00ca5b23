"use client";

import { fromZonedTime } from "date-fns-tz";
import { useMemo, useState } from "react";
import { bindSlots, type DraftBinding } from "@/lib/campaigns/bind-slots";
import type { CampaignInput, Choices } from "@/lib/campaigns/draft-schema";

export type Draft = {
  protocolVersionId: string;
  sensorId: string;
  rigId: string;
  slots: Record<string, DraftBinding>;
  /** Local time of the rig; empty: as soon as it is free. */
  notBefore: string;
  /** As typed. */
  priority: string;
  name: string;
};

/** What the address names, or all of a draft that was left before. */
export type Given = Pick<Draft, "protocolVersionId" | "sensorId" | "rigId"> & Partial<Draft> & { draftId?: string };

/** The campaign as it is being put together, and as the API takes it once nothing is missing. */
export function useDraft(choices: Choices, given: Given) {
  const [draft, setDraft] = useState<Draft>(() => bound(begun(given), choices));
  const change = (changes: Partial<Draft>) => setDraft((before) => bound({ ...before, ...changes }, choices));
  const body = useMemo(() => bodyOf(draft, choices), [draft, choices]);
  return { draft, change, body };
}

function begun({ draftId: _draftId, slots = {}, notBefore = "", priority = "0", name = "", ...given }: Given): Draft {
  return { ...given, slots, notBefore, priority, name };
}

/** Slots follow the protocol and the rig; a sensor that is mounted brings its rig, and a rig the sensor that is mounted there. */
function bound(draft: Draft, { versions, rigs, lots, sensors }: Choices): Draft {
  const rigId = draft.rigId || (sensors.find(({ id }) => id === draft.sensorId)?.rigId ?? "");
  const sensorId = draft.sensorId || (rigId && (sensors.find((sensor) => sensor.rigId === rigId)?.id ?? ""));
  const version = versions.find(({ id }) => id === draft.protocolVersionId);
  const rig = rigs.find(({ id }) => id === rigId);
  return { ...draft, rigId, sensorId, slots: version && rig ? bindSlots(version.slots, rig, lots, draft.slots) : draft.slots };
}

function bodyOf({ protocolVersionId, sensorId, rigId, slots, notBefore, priority, name }: Draft, { rigs }: Choices): CampaignInput | undefined {
  const rig = rigs.find(({ id }) => id === rigId);
  if (!protocolVersionId || !sensorId || !rig) return undefined;
  const bindings: CampaignInput["slots"] = {};
  for (const [slot, { port, lotId }] of Object.entries(slots)) {
    if (port === null || !lotId) return undefined;
    bindings[slot] = { port, lotId };
  }
  const startAt = notBefore ? fromZonedTime(notBefore, rig.timeZone) : undefined;
  return {
    protocolVersionId,
    sensorId,
    rigId,
    slots: bindings,
    priority: wholeBetween(priority),
    ...(startAt && !Number.isNaN(startAt.getTime()) && { startAt: startAt.toISOString() }),
    ...(name.trim() && { name: name.trim() }),
  };
}

const wholeBetween = (typed: string): number => Math.max(-100, Math.min(100, Math.trunc(Number(typed.replace("\u2212", "-"))) || 0));
