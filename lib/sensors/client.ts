import { infiniteQueryOptions, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { mountPage } from "@/lib/mounts/schema";
import { sensorAnswer, sensorPage, type SensorAnswer } from "@/lib/sensors/schema";

type SensorPage = { items: SensorAnswer[]; nextCursor: string | null };

/** Sensors by serial number, a page at a time. */
export const sensorsOptions = (search = "") =>
  infiniteQueryOptions({
    queryKey: ["sensors", "list", search],
    queryFn: ({ signal, pageParam }): Promise<SensorPage> => {
      const query = new URLSearchParams({ limit: "50", ...(search && { search }), ...(pageParam && { cursor: pageParam }) });
      return fetchJson(`/api/sensors?${query}`, { answer: sensorPage, signal });
    },
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: SensorPage) => nextCursor,
    refetchInterval: 30_000,
  });

export const sensorOptions = (sensorId: string) =>
  queryOptions({
    queryKey: ["sensors", "one", sensorId],
    queryFn: ({ signal }) => fetchJson(`/api/sensors/${sensorId}`, { answer: sensorAnswer, signal }),
    refetchInterval: 30_000,
  });

export const mountsOptions = (sensorId: string) =>
  queryOptions({
    queryKey: ["sensors", "mounts", sensorId],
    queryFn: ({ signal }) => fetchJson(`/api/sensors/${sensorId}/mounts?limit=100`, { answer: mountPage, signal }),
  });
