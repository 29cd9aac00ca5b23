"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { useSearchParams } from "next/navigation";
import { useMemo } from "react";
import { LinkButton } from "@/components/ui/button";
import { AddressWord, ChoiceSentence } from "@/components/ui/choice-sentence";
import { DataTable } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { PageTitle, Section } from "@/components/ui/page";
import { SearchForm } from "@/components/ui/search-form";
import { Empty } from "@/components/ui/states";
import { useSearch } from "@/components/ui/use-search";
import { useTableAddress } from "@/components/ui/use-table-address";
import { may, type Role } from "@/lib/permissions";
import { protocolsOptions } from "@/lib/protocols/client";
import { PROTOCOL_SORTS, type ProtocolQuery } from "@/lib/protocols/schema";
import { columnsIn } from "./columns";

const SHOWN: readonly { value: ProtocolQuery["show"]; label: string }[] = [
  { value: "inUse", label: "every protocol in use" },
  { value: "drafts", label: "those with a draft" },
  { value: "retired", label: "the retired ones" },
];

export function ProtocolsScreen({ role, zone, now }: { role: Role; zone: string; now: string }) {
  const params = useSearchParams();
  const { search, onSearch } = useSearch();
  const address = useTableAddress("-changed");
  const sort = PROTOCOL_SORTS.find((one) => one === address.sort) ?? "-changed";
  const show = SHOWN.find(({ value }) => value === params.get("show"))?.value ?? "inUse";
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(protocolsOptions({ sort, show, search }));
  const columns = useMemo(() => columnsIn(zone, now), [zone, now]);
  const newProtocol = may(role, "edit protocols") && <LinkButton look="primary" href="/protocols/new">New protocol</LinkButton>;
  return (
    <>
      <PageTitle actions={newProtocol}>Protocols</PageTitle>
      <Section head="All protocols" note="What each takes is reckoned for a wire of 2 kHz on a rig like most." controls={<SearchForm label="Name" search={search} onSearch={onSearch} />}>
        <ChoiceSentence>Show <AddressWord name="show" label="Which protocols" options={SHOWN} fallback="inUse" />.</ChoiceSentence>
        <div className="mt-3">
          <DataTable
            label="Protocols"
            columns={columns}
            rows={data?.pages.flatMap(({ items }) => items)}
            rowKey={({ id }) => id}
            rowHref={({ id }) => `/protocols/${id}`}
            sort={sort}
            onSort={address.onSort}
            error={error}
            onRetry={() => void refetch()}
            refreshing={isRefetching}
            empty={<NoProtocol show={show} search={search} action={newProtocol} />}
          />
          <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More protocols</More>
        </div>
      </Section>
    </>
  );
}

function NoProtocol({ show, search, action }: { show: ProtocolQuery["show"]; search: string; action: React.ReactNode }) {
  if (search) return <Empty>No protocol here has “{search}” in its name.</Empty>;
  if (show === "drafts") return <Empty>No protocol has a draft: every change is in a version.</Empty>;
  if (show === "retired") return <Empty>No protocol is retired.</Empty>;
  return (
    <Empty note="A protocol says what the rig does, step by step. Its versions never change, so that a campaign can always be read against what it followed." actions={action}>
      No protocol has been written yet.
    </Empty>
  );
}
