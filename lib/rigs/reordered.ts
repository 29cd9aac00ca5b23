import { placeInLine } from "@/lib/rigs/line";
import type { LaneAnswer, LaneCampaign } from "@/lib/rigs/timeline-schema";

/**
 * A rig's weeks if its line stood in another order: starts, ends and what is drawn follow. Waits for a date inside a protocol move
 * along with their campaign here; the server works them out anew once the move is made. Pure.
 *
 * @param line Ids of all queued campaigns, first first.
 */
export function reordered(lane: LaneAnswer, line: readonly string[]): LaneAnswer {
  const occupying = lane.campaigns.filter(({ queued }) => !queued);
  const waiting = line.flatMap((id) => lane.campaigns.filter((campaign) => campaign.queued && campaign.id === id));
  const free = occupying.at(-1)?.end;
  const freeAt = ms(free?.at ?? lane.now);
  const placed = placeInLine({
    free: { at: freeAt, earliest: free?.range ? ms(free.range.earliest) : freeAt, latest: free?.range ? ms(free.range.latest) : freeAt },
    waiting: waiting.map(({ id, startAt, seconds, lowS, highS }) => ({ id, startAt: startAt === null ? null : ms(startAt), seconds, lowS, highS })),
    blocked: lane.blocked.map(({ from, to }) => ({ from: ms(from), to: ms(to) })),
  });
  const isKnown = !occupying.some(({ end }) => end.range === null);
  const moved = placed.flatMap(({ id, from, end }): LaneCampaign[] => {
    const campaign = waiting.find((one) => one.id === id);
    if (!campaign) return [];
    const by = from - ms(campaign.from);
    return [
      {
        ...campaign,
        from: iso(from),
        end: { at: iso(end.at), range: isKnown ? { earliest: iso(end.earliest), latest: iso(end.latest) } : null },
        strip: { ...campaign.strip, segments: campaign.strip.segments.map((segment) => ({ ...segment, from: iso(ms(segment.from) + by), to: iso(ms(segment.to) + by) })) },
      },
    ];
  });
  return { ...lane, campaigns: [...occupying, ...moved], freeFrom: lane.freeFrom === null ? null : (moved.at(-1)?.end.at ?? iso(freeAt)) };
}

const ms = (at: string) => Date.parse(at);
const iso = (at: number) => new Date(at).toISOString();
