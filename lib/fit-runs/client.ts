import { queryOptions } from "@tanstack/react-query";
import { comparison, fitRunList } from "@/lib/fit-runs/schema";
import { fetchJson } from "@/lib/http/fetch-json";

const RUNNING_MS = 1000;
const IDLE_MS = 30_000;

/** The fit runs of a campaign; asked often while one is being made. */
export const fitRunsOptions = (campaignId: string) =>
  queryOptions({
    queryKey: ["campaigns", "fit-runs", campaignId],
    queryFn: ({ signal }) => fetchJson(`/api/campaigns/${campaignId}/fit-runs`, { answer: fitRunList, signal }),
    refetchInterval: ({ state }) => (state.data?.items.some((run) => run.state === "waiting") ? RUNNING_MS : IDLE_MS),
  });

export const comparisonOptions = (fitRunId: string, withFitRunId: string) =>
  queryOptions({
    queryKey: ["campaigns", "fit-run-comparison", fitRunId, withFitRunId],
    queryFn: ({ signal }) => fetchJson(`/api/fit-runs/${fitRunId}/compare?with=${withFitRunId}`, { answer: comparison, signal }),
    staleTime: IDLE_MS,
  });
