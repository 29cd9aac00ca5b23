"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import { lotsOptions } from "@/lib/liquids/client";
import { rigOptions, rigsOptions } from "@/lib/rigs/client";
import { sensorOptions } from "@/lib/sensors/client";
import type { TaskAnswer } from "@/lib/tasks/schema";

/** Reads beforehand what the task's dialog asks about, so that it opens without a network too. */
export function useAtHand(task: TaskAnswer | undefined): void {
  const queries = useQueryClient();
  const { kind, rigId, sensorId } = task ?? {};
  useEffect(() => {
    if (kind === "load" && rigId) void Promise.all([queries.prefetchQuery(rigOptions(rigId)), queries.prefetchQuery(lotsOptions())]);
    if (kind === "mount" && sensorId) void Promise.all([queries.prefetchQuery(sensorOptions(sensorId)), queries.prefetchInfiniteQuery(rigsOptions())]);
  }, [queries, kind, rigId, sensorId]);
}
