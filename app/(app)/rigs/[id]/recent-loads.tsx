"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { formatVolume, NO_VALUE } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { loadsOptions } from "@/lib/rigs/client";
import type { LoadAnswer } from "@/lib/rigs/schema";

export function RecentLoads({ rigId, timeZone }: { rigId: string; timeZone: string }) {
  const { data, error, refetch, isRefetching } = useQuery(loadsOptions(rigId));
  const columns = useMemo(() => columnsIn(timeZone), [timeZone]);
  return (
    <DataTable
      label="Loads"
      columns={columns}
      rows={data?.items}
      rowKey={({ id }) => id}
      error={error}
      onRetry={() => void refetch()}
      refreshing={isRefetching}
      empty={<p className="text-ink2">Nothing has been put on a port yet.</p>}
    />
  );
}

const columnsIn = (timeZone: string): TableColumn<LoadAnswer>[] => [
  { id: "at", head: "When", slot: "c", cell: ({ loadedAt }) => <span className="num">{formatDayTime(loadedAt, timeZone)}</span> },
  { id: "port", head: "Port", slot: "d", align: "right", cell: ({ port }) => port },
  { id: "what", head: "What", slot: "a", cell: ({ liquidName, lotCode, how }) => `${liquidName}, lot ${lotCode}${how === "topUp" ? ", topped up" : ""}` },
  { id: "volume", head: "Volume", slot: "b", align: "right", cell: ({ volumeMl }) => formatVolume(volumeMl) },
  { id: "who", head: "Who", slot: "x", cell: ({ loadedBy }) => loadedBy ?? NO_VALUE },
];
