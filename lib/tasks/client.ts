import { queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { taskPage } from "@/lib/tasks/schema";

const LIVE_MS = 30_000;

export const tasksOptions = () =>
  queryOptions({
    queryKey: ["tasks", "open"],
    queryFn: ({ signal }) => fetchJson("/api/tasks?limit=200", { answer: taskPage, signal }),
    refetchInterval: LIVE_MS,
  });

/** The latest that were answered, for "Done today". */
export const answeredTasksOptions = () =>
  queryOptions({
    queryKey: ["tasks", "answered"],
    queryFn: ({ signal }) => fetchJson("/api/tasks?state=answered&limit=50", { answer: taskPage, signal }),
    refetchInterval: 15_000,
  });
