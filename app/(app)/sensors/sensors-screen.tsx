"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { LinkButton } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { PageTitle, Section } from "@/components/ui/page";
import { SearchForm } from "@/components/ui/search-form";
import { Empty } from "@/components/ui/states";
import { useSearch } from "@/components/ui/use-search";
import { may, type Role } from "@/lib/permissions";
import { sensorsOptions } from "@/lib/sensors/client";
import { columnsIn } from "./columns";

export function SensorsScreen({ role, zone }: { role: Role; zone: string }) {
  const { search, onSearch } = useSearch();
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(sensorsOptions(search));
  const columns = useMemo(() => columnsIn(zone), [zone]);
  const newSensor = may(role, "edit sensors") && <LinkButton look="primary" href="/sensors/new">New sensor</LinkButton>;
  return (
    <>
      <PageTitle actions={newSensor}>Sensors</PageTitle>
      <Section label="Sensors" controls={<SearchForm label="Serial number" search={search} onSearch={onSearch} />}>
        <DataTable
          label="Sensors"
          columns={columns}
          rows={data?.pages.flatMap(({ items }) => items)}
          rowKey={({ id }) => id}
          rowHref={({ id }) => `/sensors/${id}`}
          error={error}
          onRetry={() => void refetch()}
          refreshing={isRefetching}
          empty={search ? <Empty>No sensor has “{search}” in its serial number.</Empty> : <Empty actions={newSensor}>No sensor has been recorded yet.</Empty>}
        />
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More sensors</More>
      </Section>
    </>
  );
}
