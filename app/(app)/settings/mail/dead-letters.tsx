"use client";

import { useInfiniteQuery, useMutation, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo } from "react";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { formatDayTime } from "@/lib/format-time";
import { deadLettersOptions, sendAgain } from "@/lib/notifications/client";
import type { NotificationAnswer } from "@/lib/notifications/schema";

/** Mail that was given up after its last try: to whom, what about, what the mail server said. */
export function DeadLetters({ zone }: { zone: string }) {
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(deadLettersOptions());
  const columns = useMemo(() => columnsIn(zone), [zone]);
  return (
    <>
      <PageTitle crumbs={[{ label: "Settings", href: "/settings" }, { label: "Undelivered mail" }]}>Undelivered mail</PageTitle>
      <Section note="Each was tried for hours. Once the mail server takes it, send it again.">
        <DataTable
          label="Undelivered mail"
          columns={columns}
          rows={data?.pages.flatMap(({ items }) => items)}
          rowKey={({ id }) => id}
          error={error}
          onRetry={() => void refetch()}
          refreshing={isRefetching}
          empty={<Empty>All mail has been delivered.</Empty>}
        />
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>Earlier</More>
      </Section>
    </>
  );
}

const columnsIn = (zone: string): readonly TableColumn<NotificationAnswer>[] => [
  { id: "at", head: "Written", slot: "b", cell: ({ createdAt }) => <span className="num">{formatDayTime(createdAt, zone)}</span> },
  { id: "to", head: "To", slot: "c", cell: ({ person, address }) => <>{person}<span className="line-2">{address}</span></> },
  { id: "subject", head: "Subject", slot: "a", cell: ({ subject, alarmId }) => (alarmId ? <Link href={`/alarms/${alarmId}`}>{subject}</Link> : subject) },
  { id: "error", head: "The mail server said", slot: "w", cell: ({ error }) => <span className="text-ink2 [overflow-wrap:anywhere]">{error}</span> },
  { id: "tries", head: "Tries", slot: "x", align: "right", cell: ({ tries }) => tries },
  { id: "verb", head: "", slot: "d", align: "right", cell: ({ id }) => <SendAgain id={id} /> },
];

function SendAgain({ id }: { id: string }) {
  const queries = useQueryClient();
  const send = useMutation({ mutationFn: () => sendAgain(id), onSuccess: () => queries.invalidateQueries({ queryKey: ["notifications"] }) });
  return <Button small busy={send.isPending} onClick={() => send.mutate()}>{send.error ? "Try again" : "Send again"}</Button>;
}
