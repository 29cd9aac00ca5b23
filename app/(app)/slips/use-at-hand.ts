"use client";

import { useInfiniteQuery, useQuery } from "@tanstack/react-query";
import { lotsOptions } from "@/lib/liquids/client";
import { rigOptions, rigsOptions } from "@/lib/rigs/client";
import { sensorOptions } from "@/lib/sensors/client";
import type { TaskAnswer } from "@/lib/tasks/schema";

/** Reads and keeps what the task's dialog asks about, so that it opens without a network too. */
export function useAtHand(task: TaskAnswer | undefined): void {
  const { kind, rigId = "", sensorId = "" } = task ?? {};
  const isLoad = kind === "load";
  const isMount = kind === "mount" && sensorId !== "";
  useQuery({ ...rigOptions(rigId), enabled: isLoad, refetchInterval: false });
  useQuery({ ...lotsOptions(), enabled: isLoad });
  useQuery({ ...sensorOptions(sensorId), enabled: isMount, refetchInterval: false });
  useInfiniteQuery({ ...rigsOptions(), enabled: isMount, refetchInterval: false });
}
