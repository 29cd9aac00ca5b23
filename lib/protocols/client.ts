import { infiniteQueryOptions, keepPreviousData, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import type { DefinitionInput } from "@/lib/protocol/schema";
import { estimateAnswer, protocolAnswer, protocolPage, type ProtocolItem, type ProtocolQuery, versionAnswer } from "@/lib/protocols/schema";

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

type Checked = { definition: DefinitionInput | undefined; rigId: string; sensorId: string };

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
