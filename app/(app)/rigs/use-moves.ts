"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { movedAnswer } from "@/lib/campaigns/draft-schema";
import { fetchJson } from "@/lib/http/fetch-json";
import { timelineOptions } from "@/lib/rigs/client";
import { reordered } from "@/lib/rigs/reordered";
import type { LaneAnswer } from "@/lib/rigs/timeline-schema";

/** A queued campaign in hand: where it would stand in the line of its rig. */
export type Held = { rigId: string; campaignId: string; line: readonly string[]; by: "keys" | "pointer" };

export const lineOf = ({ campaigns }: LaneAnswer): string[] => campaigns.filter(({ queued }) => queued).map(({ id }) => id);

/** The line with one of it at another place; beyond its ends it stays at the end. */
export function withPlace(line: readonly string[], campaignId: string, place: number): string[] {
  const others = line.filter((id) => id !== campaignId);
  return others.toSpliced(Math.max(0, Math.min(others.length, place)), 0, campaignId);
}

/** Queued campaigns taken up, tried at another place and put down: starts, ends and sentence follow before anything is stored. */
export function useMoves(lanes: readonly LaneAnswer[]) {
  const queries = useQueryClient();
  const [held, setHeld] = useState<Held>();
  const move = useMutation({
    mutationFn: ({ campaignId, line }: Held) => {
      const before = line[line.indexOf(campaignId) + 1] ?? null;
      return fetchJson(`/api/campaigns/${campaignId}/move`, { method: "POST", body: { before }, answer: movedAnswer });
    },
    onSettled: async () => {
      await queries.invalidateQueries({ queryKey: timelineOptions().queryKey });
      void queries.invalidateQueries({ queryKey: ["campaigns"] });
      setHeld(undefined);
    },
  });
  const putDown = () => {
    const lane = lanes.find(({ rigId }) => rigId === held?.rigId);
    if (!held || !lane || move.isPending) return;
    if (held.line.join() === lineOf(lane).join()) setHeld(undefined);
    else move.mutate(held);
  };
  return {
    held,
    /** The lanes as they would be. */
    shown: held ? lanes.map((lane) => (lane.rigId === held.rigId ? reordered(lane, held.line) : lane)) : lanes,
    error: move.error,
    busy: move.isPending,
    take: (next: Held) => {
      move.reset();
      setHeld(next);
    },
    putDown,
    letGo: () => {
      if (!move.isPending) setHeld(undefined);
    },
  };
}

export type Moves = ReturnType<typeof useMoves>;
