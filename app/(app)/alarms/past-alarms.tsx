"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo } from "react";
import { AddressWord, ChoiceSentence } from "@/components/ui/choice-sentence";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { Section } from "@/components/ui/page";
import { pastAlarmsOptions, type AlarmFilter } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { titleOf } from "@/lib/alarms/words";
import { campaignCode } from "@/lib/campaigns/code";
import { capitalised, NO_VALUE } from "@/lib/format";
import { formatDuration, formatRecent } from "@/lib/format-time";
import { HowFar } from "./how-far";

const KINDS = [
  { value: "", label: "every kind" },
  { value: "return", label: "air reference" },
  { value: "drift", label: "drift" },
  { value: "fit", label: "fits" },
  { value: "temperature", label: "temperature" },
  { value: "count", label: "failed attempts" },
  { value: "silence", label: "silence" },
  { value: "clock", label: "clock" },
];

type PastAlarmsProps = { filter: AlarmFilter; rigs: readonly { id: string; name: string }[]; now: string };

export function PastAlarms({ filter, rigs, now }: PastAlarmsProps) {
  const { data, error, refetch, isRefetching, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(pastAlarmsOptions(filter));
  const columns = useMemo(() => columnsAt(now.slice(0, 13) + ":00:00Z"), [now]);
  const address = `/alarms${filter.rigId || filter.kind ? `?${new URLSearchParams({ ...(filter.rigId && { rig: filter.rigId }), ...(filter.kind && { kind: filter.kind }) })}` : ""}`;
  return (
    <Section head="Past" note="How far is on the scale of the limit: the tick is the limit, the bar is the value." address={address}>
      <ChoiceSentence>
        Show past alarms of <AddressWord name="rig" label="Rig" options={[{ value: "", label: "every rig" }, ...rigs.map(({ id, name }) => ({ value: id, label: name }))]} /> and{" "}
        <AddressWord name="kind" label="Kind" options={KINDS} />.
      </ChoiceSentence>
      <DataTable
        label="Past alarms"
        columns={columns}
        rows={data?.pages.flatMap(({ items }) => items)}
        rowKey={({ id }) => id}
        rowHref={({ id }) => `/alarms/${id}`}
        error={error}
        onRetry={() => void refetch()}
        refreshing={isRefetching}
        empty={<p className="mt-2 text-ink2">{filter.rigId || filter.kind ? "None of these." : "None yet."}</p>}
      />
      <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>Earlier</More>
    </Section>
  );
}

const columnsAt = (now: string): readonly TableColumn<AlarmAnswer>[] => [
  { id: "since", head: "Since", slot: "b", cell: ({ openedAt, openedClock, timeZone }) => <span className="num">{formatRecent(openedClock ?? openedAt, timeZone, now)}</span> },
  { id: "what", head: "What", slot: "a", cell: (alarm) => <Link href={`/alarms/${alarm.id}`}>{capitalised(titleOf(alarm))}</Link> },
  { id: "where", head: "Where", slot: "c", cell: ({ rig, campaignId }) => `${rig}${campaignId ? `, ${campaignCode(campaignId)}` : ""}` },
  { id: "far", head: "How far", slot: "x", cell: (alarm) => <HowFar alarm={alarm} /> },
  { id: "lasted", head: "Lasted", slot: "d", align: "right", cell: lasted },
  { id: "who", head: "Who had it", slot: "x", cell: ({ acknowledgedBy }) => acknowledgedBy ?? <span className="text-ink3">nobody</span> },
  { id: "did", head: "What Longreed did", slot: "x", cell: ({ actionText }) => <span className="text-ink2">{actionText}</span> },
];

/** Only its opening is known on the rig's own clock; where that is simulated, how long it lasted cannot be said. */
function lasted({ openedAt, openedClock, returnedAt, clearedAt }: AlarmAnswer): string {
  const end = returnedAt ?? clearedAt;
  return openedClock || !end ? NO_VALUE : formatDuration((Date.parse(end) - Date.parse(openedAt)) / 1000);
}
