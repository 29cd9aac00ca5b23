import { queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { todayAnswer } from "@/lib/today/schema";

const LIVE_MS = 10_000;
const IDLE_MS = 60_000;

export const todayOptions = () =>
  queryOptions({
    queryKey: ["today"],
    queryFn: ({ signal }) => fetchJson("/api/today", { answer: todayAnswer, signal }),
    refetchInterval: ({ state }) => (state.data?.rigs.some(({ campaign }) => campaign?.state === "running") ? LIVE_MS : IDLE_MS),
  });
