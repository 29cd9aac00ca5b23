"use client";

import { useRef, type KeyboardEvent, type PointerEvent } from "react";
import { campaignCode } from "@/lib/campaigns/code";
import type { LaneAnswer, LaneCampaign } from "@/lib/rigs/timeline-schema";
import { lineOf, withPlace, type Moves } from "./use-moves";

const SHORTEST_DRAG_PX = 6;

type MoveHandleProps = {
  /** The lane as it is stored, and the campaign in it. */
  lane: LaneAnswer;
  campaign: LaneCampaign;
  moves: Moves;
  pxPerMs: number;
};

/** What a queued campaign is held by: dragged along its lane, or M and the arrow keys; Enter puts it down, Escape lets go. */
export function MoveHandle({ lane, campaign, moves, pxPerMs }: MoveHandleProps) {
  const grab = useRef<{ x: number; middle: number }>(undefined);
  const line = lineOf(lane);
  const { rigId } = lane;
  const { id: campaignId } = campaign;
  const held = moves.held?.campaignId === campaignId ? moves.held : undefined;
  const place = (held?.line ?? line).indexOf(campaignId);

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const to = { ArrowLeft: place - 1, ArrowUp: place - 1, ArrowRight: place + 1, ArrowDown: place + 1, Home: 0, End: line.length }[event.key];
    if (event.key.toLowerCase() === "m") {
      if (held) moves.putDown();
      else moves.take({ rigId, campaignId, line, by: "keys" });
    } else if (held && to !== undefined) moves.take({ ...held, line: withPlace(line, campaignId, to) });
    else if (held && event.key === "Enter") moves.putDown();
    else if (held && event.key === "Escape") moves.letGo();
    else return;
    event.preventDefault();
    event.stopPropagation();
  }

  function onPointerDown(event: PointerEvent<HTMLButtonElement>) {
    if (event.button !== 0 || moves.busy) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    grab.current = { x: event.clientX, middle: (Date.parse(campaign.from) + Date.parse(campaign.end.at)) / 2 };
  }
  function onPointerMove(event: PointerEvent) {
    if (!grab.current) return;
    const by = event.clientX - grab.current.x;
    if (!held && Math.abs(by) < SHORTEST_DRAG_PX) return;
    const middle = grab.current.middle + by / pxPerMs;
    const before = lane.campaigns.filter(({ id, queued, from, end }) => queued && id !== campaignId && (Date.parse(from) + Date.parse(end.at)) / 2 < middle).length;
    moves.take({ rigId, campaignId, line: withPlace(line, campaignId, before), by: "pointer" });
  }
  function onPointerUp() {
    grab.current = undefined;
    if (held?.by === "pointer") moves.putDown();
  }

  return (
    <button
      type="button"
      aria-pressed={held !== undefined}
      aria-label={`Move ${campaignCode(campaignId)}, place ${place + 1} of ${line.length} in line`}
      aria-keyshortcuts="M"
      onKeyDown={onKeyDown}
      onBlur={() => held?.by === "keys" && moves.letGo()}
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={onPointerUp}
      onPointerCancel={() => {
        grab.current = undefined;
        moves.letGo();
      }}
    />
  );
}
