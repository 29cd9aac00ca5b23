"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { F0 } from "@/components/ui/quantity";
import { StateMark } from "@/components/ui/state-mark";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatNumber, formatUncertain, NO_VALUE } from "@/lib/format";
import { usedInOptions } from "@/lib/liquids/client";
import type { UsedInAnswer } from "@/lib/liquids/schema";

const COLUMNS: readonly TableColumn<UsedInAnswer>[] = [
  { id: "campaign", head: "Campaign", slot: "a", cell: ({ campaignId, name }) => <><Link href={`/campaigns/${campaignCode(campaignId)}`} className="font-semibold">{campaignCode(campaignId)}</Link> {name}</> },
  { id: "state", head: "State", slot: "b", cell: ({ word }) => <StateMark state={word} /> },
  { id: "lot", head: "Lot", slot: "c", cell: ({ lotCode }) => lotCode },
  { id: "fills", head: "Fills", slot: "x", align: "right", cell: ({ fills }) => formatCount(fills) },
  { id: "used", head: "Used / mL", slot: "x", align: "right", cell: ({ usedMl }) => formatCount(usedMl) },
  { id: "set-points", head: "Set-points / °C", slot: "x", align: "right", cell: ({ setPointsC }) => setPointsC.map((value) => formatNumber(value, { decimals: 1 })).join(", ") || NO_VALUE },
  { id: "f0", head: <><F0 /> in it / Hz</>, slot: "d", align: "right", cell: ({ f0 }) => (f0 ? formatUncertain(f0.mean, f0.u, { decimals: 4 }) : NO_VALUE) },
];

export function UsedInTable({ liquidId, name }: { liquidId: string; name: string }) {
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(usedInOptions(liquidId));
  return (
    <>
      <DataTable
        label="Campaigns with it"
        columns={COLUMNS}
        rows={data?.pages.flatMap(({ items }) => items)}
        rowKey={({ campaignId, slot }) => `${campaignId}-${slot}`}
        rowHref={({ campaignId }) => `/campaigns/${campaignCode(campaignId)}`}
        error={error}
        onRetry={() => void refetch()}
        refreshing={isRefetching}
        empty={<p className="text-ink2">No campaign has been made with {name} yet.</p>}
      />
      <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More campaigns</More>
    </>
  );
}
