"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useRef } from "react";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { ofPhasesKey, ofRepeatsKey } from "@/lib/campaigns/client";

/** Asks again for what is computed of repeats when there are more of them, and of phase values when a phase has ended. What is shown stays until the new is there. */
export function useFollow(campaign: CampaignAnswer | undefined): void {
  const queries = useQueryClient();
  const id = campaign?.id;
  const phases = campaign && `${campaign.state} ${campaign.step?.sequence ?? 0}`;
  const repeats = campaign && `${phases} ${campaign.progress.repeats}`;
  const seen = useRef({ phases, repeats });

  useEffect(() => {
    if (!id) return;
    const before = seen.current;
    seen.current = { phases, repeats };
    if (before.repeats !== undefined && before.repeats !== repeats) void queries.invalidateQueries({ queryKey: ofRepeatsKey(id) });
    if (before.phases !== undefined && before.phases !== phases) void queries.invalidateQueries({ queryKey: ofPhasesKey(id) });
  }, [id, phases, repeats, queries]);
}
