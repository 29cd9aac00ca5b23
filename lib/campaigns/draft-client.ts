import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { campaignCreated, checkAnswer, choicesAnswer, type CampaignInput } from "@/lib/campaigns/draft-schema";
import { campaignAfter } from "@/lib/campaigns/schema";
import { fetchJson } from "@/lib/http/fetch-json";

export const choicesOptions = () =>
  queryOptions({
    queryKey: ["campaigns", "choices"],
    queryFn: ({ signal }) => fetchJson("/api/campaigns/choices", { answer: choicesAnswer, signal }),
    refetchInterval: 30_000,
  });

/** What the campaign would take; the answer before stays until the new one is there. */
export const checkOptions = (draft: CampaignInput | undefined) =>
  queryOptions({
    queryKey: ["campaigns", "check", draft],
    queryFn: ({ signal }) => fetchJson("/api/campaigns/check", { method: "POST", body: draft, answer: checkAnswer, signal }),
    enabled: draft !== undefined,
    placeholderData: keepPreviousData,
    staleTime: 30_000,
  });

/** Makes the draft, or changes the one that was made before. */
export const saveDraft = (draft: CampaignInput, draftId: string | undefined) =>
  draftId
    ? fetchJson(`/api/campaigns/${draftId}`, { method: "PATCH", body: { ...draft, startAt: draft.startAt ?? null }, answer: campaignCreated })
    : fetchJson("/api/campaigns", { method: "POST", body: draft, answer: campaignCreated });

export const queueDraft = (campaignId: string, acknowledgements: readonly string[]) =>
  fetchJson(`/api/campaigns/${campaignId}/queue`, { method: "POST", body: { acknowledgements }, answer: campaignAfter });
