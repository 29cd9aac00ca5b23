"use client";

import { useInfiniteQuery, useQuery } from "@tanstack/react-query";
import { useEffect, useMemo } from "react";
import { DataTable } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { campaignCode } from "@/lib/campaigns/code";
import { campaignsOptions, stripsOptions, type Ask } from "@/lib/campaigns/client";
import { toStripInput } from "../to-strip-input";
import { columnsFor, type CampaignRow } from "./columns";

type CampaignsTableProps = {
  label: string;
  end: string;
  ask: Ask;
  sort: string;
  onSort: (sort: string) => void;
  spanMs: number;
  /** How long the longest run of this table is, for the scale that all tables share. */
  onSpan: (spanMs: number) => void;
};

const NONE: readonly string[] = [];

/** One of the tables of the list, its rows a page at a time, its strips in one call. */
export function CampaignsTable({ label, end, ask, sort, onSort, spanMs, onSpan }: CampaignsTableProps) {
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage, dataUpdatedAt } = useInfiniteQuery(campaignsOptions(ask));
  const campaigns = useMemo(() => data?.pages.flatMap(({ items }) => items), [data]);
  const ids = useMemo(() => campaigns?.map(({ id }) => id) ?? NONE, [campaigns]);
  const live = campaigns?.some(({ state }) => state === "running") ?? false;
  const strips = useQuery(stripsOptions(ids.slice(0, 200), live));
  const inputs = useMemo(() => new Map(strips.data?.items.map(({ campaignId, strip }) => [campaignId, toStripInput(strip)])), [strips.data]);

  const longest = Math.max(0, ...[...inputs.values()].map(({ from, to }) => Date.parse(to) - Date.parse(from)));
  useEffect(() => onSpan(longest), [longest, onSpan]);

  const columns = useMemo(() => columnsFor({ end, spanMs }), [end, spanMs]);
  const rows = campaigns?.map((campaign): CampaignRow => ({ campaign, strip: inputs.get(campaign.id), spanMs, asOf: dataUpdatedAt }));
  return (
    <>
      <DataTable
        label={label}
        columns={columns}
        rows={rows}
        rowKey={({ campaign }) => campaign.id}
        rowHref={({ campaign }) => `/campaigns/${campaignCode(campaign.id)}`}
        sort={sort}
        onSort={onSort}
        error={error ?? strips.error}
        onRetry={() => void (error ? refetch() : strips.refetch())}
        refreshing={isRefetching}
        empty={<p className="text-ink2">Nothing here.</p>}
        tall
      />
      <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More campaigns</More>
    </>
  );
}
