import type { StripInput } from "@/components/strip/strip-input";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { formatUncertain } from "@/lib/format";

type Window = { from: string; to: string; silentSince?: string };

/** A campaign's run cut to a window of time, as the strip draws it. */
export function stripInputIn(strip: StripAnswer, { from, to, silentSince }: Window): StripInput {
  const start = Date.parse(from);
  const end = Date.parse(to);
  const liquids = new Map(strip.liquids.map((liquid) => [liquid.slot, liquid]));
  return {
    from,
    to,
    now: strip.now,
    silentSince,
    halt: strip.halt,
    limit: strip.limit,
    segments: strip.segments
      .filter((segment) => Date.parse(segment.to) >= start && Date.parse(segment.from) <= end)
      .map(({ medium, f0, phaseId: _, ...segment }) => {
        const liquid = medium === undefined ? undefined : liquids.get(medium);
        return {
          ...segment,
          ...(liquid ? { letter: liquid.letter, tint: liquid.tint } : {}),
          label: segment.kind === "liquid" ? (liquid?.name ?? segment.label) : segment.label,
          ...(f0 ? { mean: `${formatUncertain(f0.mean, f0.u, { decimals: 4 })} Hz` } : {}),
        };
      }),
    trace: strip.trace.filter(({ at }) => Date.parse(at) >= start && Date.parse(at) <= end),
  };
}
