import { infiniteQueryOptions, keepPreviousData, queryOptions } from "@tanstack/react-query";
import { backToAirAnswer, driftAnswer, seriesAnswer, stabilityAnswer } from "@/lib/analysis/schema";
import { campaignAnswer, campaignPage, eventPage, type CampaignItem } from "@/lib/campaigns/answers";
import { stripAnswer } from "@/lib/campaigns/strip-schema";
import { fetchJson } from "@/lib/http/fetch-json";
import { sweepAnswer } from "@/lib/readings/schema";

/** How often a page asks again while something runs, and while nothing does. */
const LIVE_MS = 2000;
const IDLE_MS = 30_000;

export type Ask = Readonly<Record<string, string | number | undefined>>;

const address = (path: string, ask: Ask = {}): string => {
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

export const campaignOptions = (campaignId: string) =>
  queryOptions({
    queryKey: ["campaigns", "one", campaignId],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}`, { answer: campaignAnswer, signal }),
    refetchInterval: ({ state }) => (state.data && ["running", "held", "queued"].includes(state.data.state) ? LIVE_MS : IDLE_MS),
  });

/** What is computed of the repeats: asked again when the campaign has moved, which `version` tells (its repeats so far). */
const ofRepeats = <A>(name: string, campaignId: string, ask: Ask, version: number, parse: (text: string, signal: AbortSignal) => Promise<A>) =>
  queryOptions({
    queryKey: ["campaigns", name, campaignId, ask, version],
    queryFn: ({ signal }) => parse(address(`/api/campaigns/${campaignId}/${name}`, ask), signal),
    placeholderData: (before: A | undefined, query) => (JSON.stringify(query?.queryKey[3]) === JSON.stringify(ask) ? before : undefined),
    staleTime: IDLE_MS,
  });

export const seriesOptions = (campaignId: string, ask: Ask, version: number) =>
  ofRepeats("series", campaignId, ask, version, (url, signal) => fetchJson(url, { answer: seriesAnswer, signal }));

export const stabilityOptions = (campaignId: string, ask: Ask, version: number) =>
  ofRepeats("stability", campaignId, ask, version, (url, signal) => fetchJson(url, { answer: stabilityAnswer, signal }));

export const driftOptions = (campaignId: string, ask: Ask, version: number) =>
  ofRepeats("drift", campaignId, ask, version, (url, signal) => fetchJson(url, { answer: driftAnswer, signal }));

export const backToAirOptions = (campaignId: string, version: number) =>
  ofRepeats("back-to-air", campaignId, {}, version, (url, signal) => fetchJson(url, { answer: backToAirAnswer, signal }));

export const stripOptions = (campaignId: string, version: number) =>
  ofRepeats("strip", campaignId, {}, version, (url, signal) => fetchJson(url, { answer: stripAnswer, signal }));

export const sweepOptions = (campaignId: string, ask: Ask, version: number) =>
  ofRepeats("sweep", campaignId, ask, version, (url, signal) => fetchJson(url, { answer: sweepAnswer, signal }));

export const eventsOptions = (campaignId: string, version: number) =>
  ofRepeats("events", campaignId, { limit: 50 }, version, (url, signal) => fetchJson(url, { answer: eventPage, signal }));
