import type { StripInput, StripSegment, TracePoint } from "@/components/strip/strip-input";
import type { SeriesAnswer } from "@/lib/analysis/schema";
import { campaignCode } from "@/lib/campaigns/code";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { formatUncertain } from "@/lib/format";

type Options = {
  /** Makes phases open the campaign's page at their window. */
  campaignId?: string;
  /** The agent has been silent since, by the rig's clock. */
  silentSince?: string;
  /** Repeats in air, for a trace with a dot a repeat; without them a phase is a bar at its value. */
  air?: SeriesAnswer;
};

/** The run of a campaign as the API answers it, for `RunStrip`: liquids get their letter and tint, phase values their text. */
export function toStripInput(strip: StripAnswer, { campaignId, silentSince, air }: Options = {}): StripInput {
  const { from, to, now, halt, limit } = strip;
  const segments = strip.segments.map((segment) => segmentOf(segment, strip.liquids, campaignId));
  return { from, to, now, segments, halt, silentSince, trace: traceOf(strip, air), limit };
}

type Window = { from: string; to: string; silentSince?: string };

/** The run cut to a window of time. */
export function stripInputIn(strip: StripAnswer, { from, to, silentSince }: Window): StripInput {
  const whole = toStripInput(strip, { silentSince });
  const start = Date.parse(from);
  const end = Date.parse(to);
  return {
    ...whole,
    from,
    to,
    segments: whole.segments.filter((segment) => Date.parse(segment.to) >= start && Date.parse(segment.from) <= end),
    trace: whole.trace?.filter(({ at }) => Date.parse(at) >= start && Date.parse(at) <= end),
  };
}

function segmentOf({ kind, medium, label, f0, phaseId, cycle, find, ...segment }: StripAnswer["segments"][number], liquids: StripAnswer["liquids"], campaignId: string | undefined): StripSegment {
  const liquid = medium === undefined ? undefined : liquids.find(({ slot }) => slot === medium);
  const name = kind === "liquid" && liquid ? liquid.name : label;
  return {
    ...segment,
    kind,
    ...(cycle > 0 && !find && { cycle }),
    ...(kind === "air" ? { letter: "A" } : liquid ? { letter: liquid.letter, tint: liquid.tint } : {}),
    label: find ? `Search for the resonance in ${kind === "air" ? "air" : name}` : name,
    ...(f0 && { mean: `${formatUncertain(f0.mean, f0.u, { decimals: 4 })}\u00a0Hz` }),
    ...(campaignId !== undefined && phaseId !== undefined && { href: `/campaigns/${campaignCode(campaignId)}?${new URLSearchParams({ medium: medium ?? "air", from: segment.from, to: segment.to })}#repeats` }),
  };
}

/** Each air reference from its first to its last repeat, in mHz against its baseline. */
function traceOf({ trace, segments }: StripAnswer, air: SeriesAnswer | undefined): TracePoint[] {
  const phases = new Map(segments.flatMap((segment) => (segment.phaseId ? [[segment.phaseId, segment]] : [])));
  const repeats = new Map<string, SeriesAnswer["buckets"]>();
  for (const bucket of air?.buckets ?? []) {
    const phase = repeats.get(bucket.phaseId);
    if (phase) phase.push(bucket);
    else repeats.set(bucket.phaseId, [bucket]);
  }
  return trace.flatMap(({ phaseId, at, value, u }): TracePoint[] => {
    const phase = phases.get(phaseId);
    const mean = phase?.f0?.mean;
    const buckets = repeats.get(phaseId);
    if (mean !== undefined && buckets) {
      return buckets.map((bucket) => ({ at: new Date((Date.parse(bucket.from) + Date.parse(bucket.to)) / 2).toISOString(), value: value + (bucket.mean - mean) * 1000 }));
    }
    return phase ? [{ at: phase.from, value, u }, { at: new Date(Math.max(Date.parse(phase.from), Date.parse(phase.to) - 1)).toISOString(), value, u }] : [{ at, value, u }];
  });
}
