"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { PageTitle, Section } from "@/components/ui/page";
import { SearchForm } from "@/components/ui/search-form";
import { Empty } from "@/components/ui/states";
import { useSearch } from "@/components/ui/use-search";
import { liquidsOptions } from "@/lib/liquids/client";
import { may, type Role } from "@/lib/permissions";
import { COLUMNS } from "./columns";

export function LiquidsScreen({ role }: { role: Role }) {
  const { search, onSearch } = useSearch();
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(liquidsOptions(search));
  const newLiquid = may(role, "edit liquids") && <LinkButton look="primary" href="/liquids/new">New liquid</LinkButton>;
  return (
    <>
      <PageTitle actions={newLiquid}>Liquids</PageTitle>
      <Section label="Liquids" controls={<SearchForm label="Name" search={search} onSearch={onSearch} />}>
        <DataTable
          label="Liquids"
          columns={COLUMNS}
          rows={data?.pages.flatMap(({ items }) => items)}
          rowKey={({ id }) => id}
          rowHref={({ id }) => `/liquids/${id}`}
          error={error}
          onRetry={() => void refetch()}
          refreshing={isRefetching}
          empty={search ? <Empty>No liquid has “{search}” in its name.</Empty> : <Empty actions={newLiquid}>No liquid has been recorded yet.</Empty>}
        />
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More liquids</More>
      </Section>
    </>
  );
}
