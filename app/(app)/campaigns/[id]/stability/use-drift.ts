"use client";

import { keepPreviousData, useQuery } from "@tanstack/react-query";
import { driftOptions, seriesOptions } from "@/lib/campaigns/client";
import type { AnalysisProps } from "./analysis-screen";
import { selectionOf } from "./analysis-view";
import { shownMedia } from "./choices";

const POINTS = 800;

/** The medium that drift is about, and what is read of it. */
export function useDrift({ campaign, view }: Pick<AnalysisProps, "campaign" | "view">, compensate = view.compensate) {
  const [{ medium, name: given }] = shownMedia({ campaign, view });
  const setPointC = view.setPointC ?? (campaign.setPointsC.length > 1 ? campaign.setPointsC[0] : undefined);
  const ask = { ...selectionOf(view, setPointC), medium };
  const plot = { ...ask, points: POINTS, from: view.window?.from, to: view.window?.to };
  const drift = useQuery({ ...driftOptions(campaign.id, { ...ask, quantity: view.quantity, compensate: compensate === "none" ? undefined : compensate }), placeholderData: keepPreviousData });
  const series = useQuery({ ...seriesOptions(campaign.id, { ...plot, quantity: view.quantity }), placeholderData: keepPreviousData });
  const temperature = useQuery({ ...seriesOptions(campaign.id, { ...plot, quantity: "temperature" }), placeholderData: keepPreviousData });
  return { medium, name: medium === "air" ? "air" : given, setPointC, drift, series, temperature };
}
