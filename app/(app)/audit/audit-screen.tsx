"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useRouter } from "next/navigation";
import { useMemo } from "react";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { More } from "@/components/ui/more";
import { PageSentence, Section } from "@/components/ui/page";
import { Empty, Problem } from "@/components/ui/states";
import { entityInWords, pageOfEntity } from "@/lib/audit/about";
import { capitalised } from "@/lib/format";
import { formatRecent } from "@/lib/format-time";
import { auditOptions, type AuditFilter } from "@/lib/people/client";
import type { AuditEventAnswer } from "@/lib/people/schema";

type Props = { filter: AuditFilter; people: readonly { id: string; name: string }[]; zone: string; now: string };

export function AuditScreen({ filter, people, zone, now }: Props) {
  const router = useRouter();
  const { data, error, refetch, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(auditOptions(filter));
  const events = data?.pages.flatMap(({ items }) => items);
  const columns = useMemo(() => columnsFor(zone, now), [zone, now]);
  const search = new URLSearchParams(Object.entries(filter).filter((entry): entry is [string, string] => Boolean(entry[1])));
  const show = (personId: string) => {
    const next = new URLSearchParams(search);
    if (personId) next.set("personId", personId);
    else next.delete("personId");
    router.replace(next.size > 0 ? `/audit?${next}` : "/audit");
  };

  return (
    <>
      <PageSentence>Who did what, and when.</PageSentence>
      <Section
        head="Audit log"
        note="Written with each change, in the same transaction. It cannot be edited, not by an administrator either."
        address={search.size > 0 ? `/audit?${search}` : "/audit"}
        controls={
          <label className="field">
            <span className="field-label">Show what was done by</span>
            <select className="control" value={filter.personId ?? ""} onChange={(event) => show(event.target.value)}>
              <option value="">everyone</option>
              {people.map(({ id, name }) => <option key={id} value={id}>{name}</option>)}
            </select>
          </label>
        }
      >
        {error && <Problem error={error} onRetry={() => void refetch()} />}
        <DataTable label="Audit log" columns={columns} rows={events} rowKey={({ id }) => id} empty={<Empty>Nothing of this kind was done.</Empty>} />
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>Earlier</More>
      </Section>
    </>
  );
}

const columnsFor = (zone: string, now: string): readonly TableColumn<AuditEventAnswer>[] => [
  { id: "when", head: "When", slot: "b", cell: ({ at }) => <span className="num">{formatRecent(at, zone, now)}</span> },
  { id: "who", head: "Who", slot: "a", cell: ({ who }) => who },
  { id: "what", head: "What", slot: "c", cell: ({ action }) => capitalised(action) },
  { id: "about", head: "About", slot: "d", cell: (event) => <About event={event} /> },
  { id: "detail", head: "Detail", slot: "w", cell: ({ lines }) => <Lines lines={lines} zone={zone} now={now} /> },
];

function About({ event: { entity, entityId, about } }: { event: AuditEventAnswer }) {
  const href = about ? pageOfEntity(entity, entityId) : undefined;
  const name = about ?? entityId;
  return <>{entityInWords(entity)} {href ? <Link href={href}>{name}</Link> : name}</>;
}

const INSTANT = /^\d{4}-\d{2}-\d{2}T[\d:.]+Z$/;

/** A line a field: `name: North bench`, or `role: viewer → operator` where it was changed. */
function Lines({ lines, zone, now }: { lines: AuditEventAnswer["lines"]; zone: string; now: string }) {
  const said = (text: string) => (INSTANT.test(text) ? formatRecent(text, zone, now) : text);
  return (
    <ul className="text-ink2 [overflow-wrap:anywhere]">
      {lines.map(({ field, from, to }, i) => (
        <li key={i}>
          {field && `${field}: `}
          {from !== undefined && <>{said(from)} <span aria-hidden>→</span><span className="visually-hidden">became</span> </>}
          <span className="text-ink">{said(to)}</span>
        </li>
      ))}
    </ul>
  );
}
