import { infiniteQueryOptions, queryOptions } from "@tanstack/react-query";
import { alarmAnswer, alarmDetail, alarmPage, type AlarmAnswer } from "@/lib/alarms/schema";
import { fetchJson } from "@/lib/http/fetch-json";

const LIVE_MS = 30_000;

type AlarmPage = { items: AlarmAnswer[]; nextCursor: string | null };

/** Filters as the address has them. */
export type AlarmFilter = { rigId?: string; kind?: string };

const ask = (given: Record<string, string | undefined>) => new URLSearchParams(Object.entries(given).filter((entry): entry is [string, string] => Boolean(entry[1])));

/** Those not cleared: few, all in one page. */
export const openAlarmsOptions = () =>
  queryOptions({
    queryKey: ["alarms", "open"],
    queryFn: ({ signal }) => fetchJson("/api/alarms?state=open&limit=200", { answer: alarmPage, signal }),
    refetchInterval: LIVE_MS,
  });

export const pastAlarmsOptions = ({ rigId, kind }: AlarmFilter) =>
  infiniteQueryOptions({
    queryKey: ["alarms", "past", rigId ?? "", kind ?? ""],
    queryFn: ({ signal, pageParam }): Promise<AlarmPage> =>
      fetchJson(`/api/alarms?${ask({ state: "past", limit: "50", rigId, kind, cursor: pageParam ?? undefined })}`, { answer: alarmPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: AlarmPage) => nextCursor,
    refetchInterval: 30_000,
  });

export const alarmOptions = (alarmId: string) =>
  queryOptions({
    queryKey: ["alarms", "one", alarmId],
    queryFn: ({ signal }) => fetchJson(`/api/alarms/${alarmId}`, { answer: alarmDetail, signal }),
    refetchInterval: LIVE_MS,
  });

const post = (alarmId: string, verb: string, body?: unknown) =>
  fetchJson(`/api/alarms/${alarmId}/${verb}`, { method: "POST", body, answer: alarmAnswer });

export const acknowledge = (alarmId: string) => post(alarmId, "acknowledge");
export const clear = (alarmId: string, note: string) => post(alarmId, "clear", { note });
export const shelve = (alarmId: string, until: Date | null, note?: string) =>
  post(alarmId, "shelve", { until: until?.toISOString() ?? null, ...(note ? { note } : {}) });
