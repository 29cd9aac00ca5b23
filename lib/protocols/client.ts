import { infiniteQueryOptions, keepPreviousData, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import type { Definition } from "@/lib/protocol/schema";
import type { Draft } from "@/lib/protocols/draft";
import { draftSaved, estimateAnswer, protocolAnswer, protocolCreated, protocolPage, type ProtocolItem, type ProtocolQuery, versionAnswer } from "@/lib/protocols/schema";

type ProtocolPage = { items: ProtocolItem[]; nextCursor: string | null };
export type ProtocolChoice = Pick<ProtocolQuery, "sort" | "show"> & { search: string };

/** Protocols, a page at a time. */
export const protocolsOptions = ({ sort, show, search }: ProtocolChoice) =>
  infiniteQueryOptions({
    queryKey: ["protocols", "list", sort, show, search],
    queryFn: ({ signal, pageParam }): Promise<ProtocolPage> => {
      const query = new URLSearchParams({ limit: "50", sort, show, ...(search && { search }), ...(pageParam && { cursor: pageParam }) });
      return fetchJson(`/api/protocols?${query}`, { answer: protocolPage, signal });
    },
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: ProtocolPage) => nextCursor,
    placeholderData: keepPreviousData,
  });

export const protocolOptions = (protocolId: string) =>
  queryOptions({
    queryKey: ["protocols", "one", protocolId],
    queryFn: ({ signal }) => fetchJson(`/api/protocols/${protocolId}`, { answer: protocolAnswer, signal }),
  });

/** A version never changes, so that it is read once. */
export const versionOptions = (protocolId: string, versionId: string) =>
  queryOptions({
    queryKey: ["protocols", "version", protocolId, versionId],
    queryFn: ({ signal }) => fetchJson(`/api/protocols/${protocolId}/versions/${versionId}`, { answer: versionAnswer, signal }),
    staleTime: 60_000,
  });

type Checked = { definition: Definition | undefined; rigId: string; sensorId: string };

/** Asked anew when anything changes, the question before aborted; its answer stays until the new one is there. */
export const estimateOptions = ({ definition, rigId, sensorId }: Checked) =>
  queryOptions({
    queryKey: ["protocols", "estimate", definition, rigId, sensorId],
    queryFn: ({ signal }) =>
      fetchJson("/api/protocols/estimate", {
        method: "POST",
        body: { definition, ...(rigId && { rigId }), ...(sensorId && { sensorId }) },
        answer: estimateAnswer,
        signal,
      }),
    enabled: definition !== undefined,
    placeholderData: keepPreviousData,
    staleTime: 60_000,
    gcTime: 60_000,
  });

/** Stores a draft; without an id the protocol is made. */
export const storeDraft = (draft: Draft, { id, basedOn }: { id: string | null; basedOn: string | null | undefined }) =>
  id === null
    ? fetchJson("/api/protocols/drafts", { method: "POST", body: { draft }, answer: draftSaved })
    : fetchJson(`/api/protocols/${id}`, { method: "PATCH", body: { draft, ...(basedOn !== undefined && { draftBasedOn: basedOn }) }, answer: draftSaved });

type NewVersion = { id: string | null; definition: Draft; note: string; basedOn: number | undefined };

/** Freezes a version: the next of a protocol, or the first of a new one. */
export const saveVersion = ({ id, definition, note, basedOn }: NewVersion) =>
  id === null
    ? fetchJson("/api/protocols", { method: "POST", body: { definition }, answer: protocolCreated })
    : fetchJson(`/api/protocols/${id}/versions`, { method: "POST", body: { definition, ...(note.trim() && { note: note.trim() }), ...(basedOn !== undefined && { basedOn }) }, answer: protocolCreated });

export const throwDraftAway = (id: string, isOnlyDraft: boolean) =>
  isOnlyDraft ? fetchJson(`/api/protocols/${id}`, { method: "DELETE" }) : fetchJson(`/api/protocols/${id}`, { method: "PATCH", body: { draft: null } });
