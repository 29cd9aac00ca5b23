import type { Transaction } from "sequelize";
import { readBindings, readChosen, type BoundSlot, type Chosen, type SlotBindings } from "@/lib/campaigns/bindings";
import { findCautions, type Caution } from "@/lib/campaigns/cautions";
import type { CampaignProblem, CheckAnswer } from "@/lib/campaigns/draft-schema";
import { forecastInLine } from "@/lib/campaigns/forecast-in-line";
import { planCampaign, type Plan } from "@/lib/campaigns/plan";
import { traceLiquids } from "@/lib/campaigns/trace-liquids";
import { formatVolume } from "@/lib/format";
import { demand, type Actor } from "@/lib/people/actor";

type Draft = { protocolVersionId: string; sensorId: string; rigId: string; slots: SlotBindings; startAt?: Date | null };

export type Checked = { chosen: Chosen; bound: BoundSlot[]; plan: Plan; problems: CampaignProblem[]; cautions: Caution[] };

/** What a campaign would take and what stands against it, for the screen that queues it. Nothing is stored. */
export async function checkCampaign({ by, now, priority = 0, ...draft }: Draft & { by: Actor; now: Date; priority?: number }): Promise<CheckAnswer> {
  demand(by, "edit campaigns");
  const checked = await checkDraft({ ...draft, now });
  const { bound, plan, problems, cautions } = checked;
  const { seconds, lowS, highS, steps, repeats, cycles, wasteMl, people } = plan;
  return {
    estimate: { seconds, lowS, highS, steps, repeats, cycles, wasteMl, people },
    slots: bound.map(({ slot, port, lot, onPort }) => ({
      slot,
      neededMl: plan.neededMl[slot] ?? 0,
      port,
      loadedMl: onPort?.lotId === lot.id ? onPort.remainingMl : 0,
    })),
    problems,
    cautions,
    forecast: await forecastInLine({ checked, rigId: draft.rigId, startAt: draft.startAt, priority, now }),
  };
}

/** The same for use cases: with `error` problems a campaign is not queued, with cautions only when a named person acknowledges them. */
export async function checkDraft({ slots, startAt, now, ...choice }: Draft & { now: Date }, transaction?: Transaction): Promise<Checked> {
  const chosen = await readChosen({ ...choice, now }, transaction);
  const bound = await readBindings(chosen, slots, transaction);
  const from = new Date(Math.max((chosen.rig.clock ?? now).getTime(), startAt?.getTime() ?? -Infinity));
  const plan = planCampaign(chosen, from);
  const latestEnd = new Date(from.getTime() + plan.highS * 1000);
  const cautions = findCautions({
    slots: bound.map((slot) => ({ ...slot, neededMl: plan.neededMl[slot.slot] ?? 0 })),
    trace: traceLiquids(chosen.definition),
    plannedWasteMl: plan.wasteMl,
    wasteCapacityMl: chosen.rig.wasteCapacityMl,
    wasteMl: chosen.rig.wasteMl,
    latestEnd,
    timeZone: chosen.rig.timeZone,
  });
  return { chosen, bound, plan, problems: [...plan.problems, ...ofRig(chosen), ...ofBottles(bound, plan)], cautions };
}

function ofRig({ rig, sensor }: Chosen): CampaignProblem[] {
  const problems: CampaignProblem[] = [];
  const warn = (path: string, message: string) => problems.push({ path, severity: "warning", message });
  if (!rig.abilities) warn("rigId", `The agent of ${rig.name} has not reported yet, so that the protocol could not be checked against the rig; the campaign waits until it does.`);
  if (sensor.rigId !== rig.id) warn("sensorId", `${sensor.serial} is not mounted on ${rig.name}; the campaign begins with a mount task and a new baseline.`);
  return problems;
}

/** Bottles may still be changed before the start, so that none of this stands in the way. */
function ofBottles(bound: readonly BoundSlot[], plan: Plan): CampaignProblem[] {
  return bound.flatMap(({ slot, port, lot, liquid, onPort }): CampaignProblem[] => {
    const path = `slots.${slot}`;
    const neededMl = plan.neededMl[slot] ?? 0;
    if (!onPort) return [{ path, severity: "warning", message: `Nothing stands on port ${port} yet; ${slot} needs ${formatVolume(neededMl)} of ${liquid.name}.` }];
    if (onPort.liquidId !== liquid.id) return [{ path, severity: "warning", message: `${onPort.liquidName} stands on port ${port}; it has to be changed to ${liquid.name} before the start.` }];
    if (onPort.lotId !== lot.id) return [{ path, severity: "warning", message: `Lot ${onPort.lotCode} stands on port ${port}, not ${lot.code}.` }];
    if (onPort.remainingMl >= neededMl) return [];
    return [
      { path, severity: "warning", message: `Lot ${lot.code} has ${formatVolume(onPort.remainingMl)} on port ${port}, ${slot} needs ${formatVolume(neededMl)}; somebody has to load more on the way.` },
    ];
  });
}
