import type { Vital } from "@/components/ui/page";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { formatCount, formatNumber, formatUncertain } from "@/lib/format";
import { endOf } from "../end-words";

/** Now, cycle, expected end with its range, air reference against its limit. */
export function vitalsOf(campaign: CampaignAnswer): Vital[] {
  const { cycle, progress, air, now: asOf } = campaign;
  const end = endOf(campaign, Date.parse(asOf));
  const held = campaign.state === "held";
  return [
    {
      label: campaign.endedAt ? "How it ended" : "Now",
      value: held ? campaign.word : nowWords(campaign),
      note: held ? nowWords(campaign) : campaign.step?.state === "ready" && campaign.state === "running" ? "waits for the agent" : undefined,
    },
    {
      label: "Cycle",
      value: progress.cycles === null ? formatCount(cycle) : `${formatCount(cycle)} of ${formatCount(progress.cycles)}`,
      note: progress.repeatsPlanned === null ? `${formatCount(progress.repeats)} repeats` : `${formatCount(progress.repeats)} of ${formatCount(progress.repeatsPlanned)} repeats`,
    },
    { label: campaign.endedAt ? "Ended" : "Expected end", value: end.text, note: end.note },
    {
      label: "Air reference against the baseline",
      value: air ? `${formatUncertain(air.shiftMHz, air.u, { signed: true, decimals: 1 })}\u00a0mHz` : "none yet",
      note: air?.limitMHz ? `limit ±\u2009${formatNumber(air.limitMHz, { decimals: air.limitMHz < 10 ? 1 : 0 })}` : undefined,
    },
  ];
}

/** `2-Propanol, repeat 188 of 300`; of a campaign that has ended, how. */
export function nowWords({ state, word, endText, step, media, cursor }: CampaignAnswer): string {
  if (endText) return endText;
  if (!step) return state === "held" ? (cursor ?? word) : word;
  if (step.kind !== "measure" || !step.repeats) return step.label;
  const name = media.find(({ medium }) => medium === step.medium)?.name ?? step.label;
  return step.stored === 0 ? `${name}, ${formatCount(step.repeats)} repeats` : `${name}, repeat ${formatCount(Math.min(step.repeats, step.stored))} of ${formatCount(step.repeats)}`;
}
