import { infiniteQueryOptions, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { blockedTimePage, contactsAnswer, loadPage, rigAnswer, rigPage, tokenPage, type RigAnswer } from "@/lib/rigs/schema";
import { timelineAnswer } from "@/lib/rigs/timeline-schema";

const LIVE_MS = 10_000;

type RigPage = { items: RigAnswer[]; nextCursor: string | null };

/** All rigs, a page at a time, asked again while they are looked at. */
export const rigsOptions = () =>
  infiniteQueryOptions({
    queryKey: ["rigs", "list"],
    queryFn: ({ signal, pageParam }): Promise<RigPage> => fetchJson(`/api/rigs?limit=50${after(pageParam)}`, { answer: rigPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: RigPage) => nextCursor,
    refetchInterval: LIVE_MS,
  });

export const rigOptions = (rigId: string) =>
  queryOptions({
    queryKey: ["rigs", "one", rigId],
    queryFn: ({ signal }) => fetchJson(`/api/rigs/${rigId}`, { answer: rigAnswer, signal }),
    refetchInterval: LIVE_MS,
  });

export const contactsOptions = () =>
  queryOptions({
    queryKey: ["rigs", "contacts"],
    queryFn: ({ signal }) => fetchJson("/api/rigs/contacts", { answer: contactsAnswer, signal }),
    refetchInterval: 60_000,
  });

export const timelineOptions = () =>
  queryOptions({
    queryKey: ["rigs", "timeline"],
    queryFn: ({ signal }) => fetchJson("/api/rigs/timeline", { answer: timelineAnswer, signal }),
    refetchInterval: LIVE_MS,
  });

export const tokensOptions = (rigId: string) =>
  queryOptions({
    queryKey: ["rigs", "tokens", rigId],
    queryFn: ({ signal }) => fetchJson(`/api/rigs/${rigId}/tokens?limit=200`, { answer: tokenPage, signal }),
  });

export const loadsOptions = (rigId: string) =>
  queryOptions({
    queryKey: ["rigs", "loads", rigId],
    queryFn: ({ signal }) => fetchJson(`/api/rigs/${rigId}/loads?limit=20`, { answer: loadPage, signal }),
  });

export const blockedTimesOptions = (rigId: string) =>
  queryOptions({
    queryKey: ["rigs", "blocked-times", rigId],
    queryFn: ({ signal }) => fetchJson(`/api/rigs/${rigId}/blocked-times?limit=50`, { answer: blockedTimePage, signal }),
  });

/** The address of the next page. */
const after = (cursor: string | null) => (cursor ? `&cursor=${encodeURIComponent(cursor)}` : "");
