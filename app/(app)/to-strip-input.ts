import type { StripInput, StripSegment } from "@/components/strip/strip-input";
import { campaignCode } from "@/lib/campaigns/code";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { formatUncertain } from "@/lib/format";

type Options = {
  /** Makes phases open the campaign's page at their window. */
  campaignId?: string;
  /** The agent has been silent since, by the rig's clock. */
  silentSince?: string;
};

/** The run of a campaign as the API answers it, for `RunStrip`: liquids get their letter and tint, phase values their text. */
export function toStripInput(strip: StripAnswer, { campaignId, silentSince }: Options = {}): StripInput {
  const liquids = new Map(strip.liquids.map((liquid) => [liquid.slot, liquid]));
  const segments = strip.segments.map(({ kind, medium, label, f0, phaseId, cycle, ...segment }): StripSegment => {
    const liquid = medium === undefined ? undefined : liquids.get(medium);
    const opens = campaignId !== undefined && phaseId !== undefined;
    return {
      ...segment,
      kind,
      ...(cycle > 0 && { cycle }),
      ...(kind === "air" ? { letter: "A" } : liquid ? { letter: liquid.letter, tint: liquid.tint } : {}),
      label: kind === "liquid" && liquid ? liquid.name : label,
      ...(f0 && { mean: `${f0.u === null ? formatUncertain(f0.mean, null, { decimals: 4 }) : formatUncertain(f0.mean, f0.u)}\u00a0Hz` }),
      ...(opens && { href: `/campaigns/${campaignCode(campaignId)}?${new URLSearchParams({ medium: kind === "air" ? "air" : (medium ?? "air"), from: segment.from, to: segment.to })}#repeats` }),
    };
  });
  const { from, to, now, halt, trace, limit } = strip;
  return { from, to, now, segments, halt, silentSince, trace, limit };
}
