import { infiniteQueryOptions, keepPreviousData, queryOptions } from "@tanstack/react-query";
import { airReturnAnswer, backToAirAnswer, driftAnswer, seriesAnswer, stabilityAnswer } from "@/lib/analysis/schema";
import { campaignAnswer, campaignPage, eventPage, type CampaignItem } from "@/lib/campaigns/answers";
import { notePage } from "@/lib/campaigns/notes-schema";
import { overviewAnswer } from "@/lib/campaigns/overview-schema";
import { stripAnswer, stripsAnswer } from "@/lib/campaigns/strip-schema";
import { fetchJson } from "@/lib/http/fetch-json";
import { sweepAnswer } from "@/lib/readings/schema";

/** How often a page asks again while something runs, and while nothing does. */
const LIVE_MS = 10_000;
const STRIPS_MS = 10_000;
const IDLE_MS = 60_000;

export type Ask = Readonly<Record<string, string | number | undefined>>;

/** A path with what is asked for; what is undefined or empty is left out. */
export const address = (path: string, ask: Ask = {}): string => {
  const given = Object.entries(ask).flatMap(([name, value]) => (value === undefined || value === "" ? [] : [[name, String(value)]]));
  return given.length > 0 ? `${path}?${new URLSearchParams(given)}` : path;
};

type CampaignPage = { items: CampaignItem[]; nextCursor: string | null };

export const campaignsOptions = (filter: Ask) =>
  infiniteQueryOptions({
    queryKey: ["campaigns", "list", filter],
    queryFn: ({ signal, pageParam }): Promise<CampaignPage> =>
      fetchJson(address("/api/campaigns", { ...filter, cursor: pageParam ?? undefined }), { answer: campaignPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: CampaignPage) => nextCursor,
    placeholderData: keepPreviousData,
    refetchInterval: ({ state }) => (state.data?.pages.some(({ items }) => items.some(({ state: s }) => s === "running")) ? LIVE_MS : IDLE_MS),
  });

export const overviewOptions = (filter: Ask) =>
  queryOptions({
    queryKey: ["campaigns", "overview", filter],
    queryFn: ({ signal }) => fetchJson(address("/api/campaigns/overview", filter), { answer: overviewAnswer, signal }),
    placeholderData: keepPreviousData,
    refetchInterval: STRIPS_MS,
  });

/** The strips of the rows of a list in one call. */
export const stripsOptions = (campaignIds: readonly string[], live: boolean) =>
  queryOptions({
    queryKey: ["campaigns", "strips", campaignIds],
    queryFn: ({ signal }) => fetchJson(address("/api/campaigns/strips", { ids: campaignIds.join(",") }), { answer: stripsAnswer, signal }),
    enabled: campaignIds.length > 0,
    placeholderData: keepPreviousData,
    staleTime: STRIPS_MS,
    refetchInterval: live ? STRIPS_MS : false,
  });

export const campaignOptions = (campaignId: string) =>
  queryOptions({
    queryKey: ["campaigns", "one", campaignId],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}`, { answer: campaignAnswer, signal }),
    refetchInterval: ({ state }) => (state.data && ["running", "held", "queued"].includes(state.data.state) ? LIVE_MS : IDLE_MS),
  });

/** Keys of what is computed of a campaign's repeats: asked again when there are more of them. */
export const ofRepeatsKey = (campaignId: string) => ["campaigns", "of-repeats", campaignId] as const;
/** Keys of what is computed of its phase values: asked again when a phase has ended. */
export const ofPhasesKey = (campaignId: string) => ["campaigns", "of-phases", campaignId] as const;

export const seriesOptions = (campaignId: string, ask: Ask) =>
  queryOptions({
    queryKey: [...ofRepeatsKey(campaignId), "series", ask],
    queryFn: ({ signal }) => fetchJson(address(`/api/campaigns/${campaignId}/series`, ask), { answer: seriesAnswer, signal }),
    staleTime: IDLE_MS,
  });

/** Over repeats or over phase values; both change little with one repeat more, so they are asked again with the phases. */
export const stabilityOptions = (campaignId: string, ask: Ask) =>
  queryOptions({
    queryKey: [...ofPhasesKey(campaignId), "stability", ask],
    queryFn: ({ signal }) => fetchJson(address(`/api/campaigns/${campaignId}/stability`, ask), { answer: stabilityAnswer, signal }),
    staleTime: IDLE_MS,
  });

export const driftOptions = (campaignId: string, ask: Ask) =>
  queryOptions({
    queryKey: [...ofPhasesKey(campaignId), "drift", ask],
    queryFn: ({ signal }) => fetchJson(address(`/api/campaigns/${campaignId}/drift`, ask), { answer: driftAnswer, signal }),
    staleTime: IDLE_MS,
  });

export const backToAirOptions = (campaignId: string) =>
  queryOptions({
    queryKey: [...ofPhasesKey(campaignId), "back-to-air"],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}/back-to-air`, { answer: backToAirAnswer, signal }),
    staleTime: IDLE_MS,
  });

export const airReturnOptions = (campaignId: string, ask: Ask) =>
  queryOptions({
    queryKey: [...ofPhasesKey(campaignId), "air-return", ask],
    queryFn: ({ signal }) => fetchJson(address(`/api/campaigns/${campaignId}/air-return`, ask), { answer: airReturnAnswer, signal }),
    staleTime: IDLE_MS,
  });

export const stripOptions = (campaignId: string) =>
  queryOptions({
    queryKey: [...ofRepeatsKey(campaignId), "strip"],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}/strip`, { answer: stripAnswer, signal }),
    staleTime: IDLE_MS,
  });

export const sweepOptions = (campaignId: string, ask: Ask = {}) =>
  queryOptions({
    queryKey: [...ofRepeatsKey(campaignId), "sweep", ask],
    queryFn: ({ signal }) => fetchJson(address(`/api/campaigns/${campaignId}/sweep`, ask), { answer: sweepAnswer, signal }),
    staleTime: IDLE_MS,
  });

type EventPage = ReturnType<typeof eventPage.parse>;

export const eventsOptions = (campaignId: string, live: boolean) =>
  infiniteQueryOptions({
    queryKey: ["campaigns", "events", campaignId],
    queryFn: ({ signal, pageParam }): Promise<EventPage> =>
      fetchJson(address(`/api/campaigns/${campaignId}/events`, { limit: 50, cursor: pageParam ?? undefined }), { answer: eventPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: EventPage) => nextCursor,
    refetchInterval: live ? LIVE_MS : IDLE_MS,
  });

export const notesOptions = (campaignId: string) =>
  queryOptions({
    queryKey: ["campaigns", "notes", campaignId],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}/notes?limit=100`, { answer: notePage, signal }),
    refetchInterval: IDLE_MS,
  });
