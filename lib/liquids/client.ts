import { infiniteQueryOptions, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { liquidAnswer, liquidPage, lotPage, usedInPage, type LiquidAnswer, type UsedInAnswer } from "@/lib/liquids/schema";

/** What the server has just read for a page is not asked for again by it. */
const FRESH_MS = 10_000;

type LiquidPage = { items: LiquidAnswer[]; nextCursor: string | null };

/** Liquids by name, a page at a time. */
export const liquidsOptions = (search = "") =>
  infiniteQueryOptions({
    queryKey: ["liquids", "list", search],
    queryFn: ({ signal, pageParam }): Promise<LiquidPage> => {
      const query = new URLSearchParams({ limit: "50", ...(search && { search }), ...(pageParam && { cursor: pageParam }) });
      return fetchJson(`/api/liquids?${query}`, { answer: liquidPage, signal });
    },
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: LiquidPage) => nextCursor,
  });

export const liquidOptions = (liquidId: string) =>
  queryOptions({
    queryKey: ["liquids", "one", liquidId],
    queryFn: ({ signal }) => fetchJson(`/api/liquids/${liquidId}`, { answer: liquidAnswer, signal }),
  });

export const lotsOfLiquidOptions = (liquidId: string) =>
  queryOptions({
    queryKey: ["liquids", "lots", liquidId],
    queryFn: ({ signal }) => fetchJson(`/api/liquids/${liquidId}/lots?limit=200`, { answer: lotPage, signal }),
    staleTime: FRESH_MS,
  });

type UsedInPage = { items: UsedInAnswer[]; nextCursor: string | null };

/** Campaigns with the liquid, newest first, a page at a time. */
export const usedInOptions = (liquidId: string) =>
  infiniteQueryOptions({
    queryKey: ["liquids", "used-in", liquidId],
    staleTime: FRESH_MS,
    queryFn: ({ signal, pageParam }): Promise<UsedInPage> => {
      const query = new URLSearchParams({ limit: "20", ...(pageParam && { cursor: pageParam }) });
      return fetchJson(`/api/liquids/${liquidId}/campaigns?${query}`, { answer: usedInPage, signal });
    },
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: UsedInPage) => nextCursor,
  });

/** Lots that a person may put on a port or bind to a slot, newest first. */
export const lotsOptions = (search = "") =>
  queryOptions({
    queryKey: ["liquids", "all-lots", search],
    queryFn: ({ signal }) => fetchJson(`/api/lots?${new URLSearchParams({ limit: "200", ...(search && { search }) })}`, { answer: lotPage, signal }),
  });
