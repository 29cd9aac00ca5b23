"use client";

import { useQuery } from "@tanstack/react-query";
import { useCallback, useState } from "react";
import { LinkButton } from "@/components/ui/button";
import { PageRow, PageSentence, PageTitle, Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { overviewOptions } from "@/lib/campaigns/client";
import { may, type Role } from "@/lib/permissions";
import { CampaignsTable } from "./campaigns-table";
import { FilterSentence } from "./filter-sentence";
import { FilteredToNothing } from "./filtered-to-nothing";
import { PLACES, sortOf, type Place } from "./list-filter";
import { overviewSentence } from "./overview-sentence";
import { useFilter } from "./use-filter";

const SHORTEST_SPAN_MS = 86_400_000;
const PAGE: Record<Place, number> = { "on-rigs": 50, "in-line": 50, done: 20, draft: 20 };

export function CampaignsScreen({ role }: { role: Role }) {
  const { filter, sort, set } = useFilter();
  const { data: overview, error, refetch } = useQuery(overviewOptions(filter));
  const [spans, setSpans] = useState<Partial<Record<Place, number>>>({});
  const spanMs = Math.max(SHORTEST_SPAN_MS, ...Object.values(spans));
  const mayQueue = may(role, "edit campaigns");
  const queue = mayQueue && <LinkButton look="primary" href="/campaigns/new">Queue a campaign</LinkButton>;

  if (!overview) return <><PageTitle>Campaigns</PageTitle><Section label="Campaigns">{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the campaigns" height={320} />}</Section></>;
  if (overview.total === 0) {
    return (
      <>
        <PageTitle>Campaigns</PageTitle>
        <Section label="Campaigns">
          <Empty
            note="A campaign is one run of a protocol version with one sensor on one rig."
            actions={mayQueue && <><LinkButton look="primary" href="/protocols/new">Write a protocol</LinkButton><LinkButton href="/campaigns/new">Queue a campaign</LinkButton></>}
          >
            No campaign has been made here yet.
          </Empty>
        </Section>
      </>
    );
  }
  const tables = PLACES.filter(({ place }) => (filter.state ? place === filter.state : place !== "draft" || overview.places.draft > 0) && (overview.places[place] > 0 || filter.state === place));
  return (
    <>
      <PageSentence margin={<><b className="text-ink">{overview.total} {overview.total === 1 ? "campaign" : "campaigns"}</b>, {overview.shown} shown</>} actions={queue}>
        {overviewSentence(overview.words)}
      </PageSentence>
      <PageRow className="mt-4">
        <FilterSentence overview={overview} filter={filter} onSearch={(search) => set({ search })} />
      </PageRow>
      {error && <PageRow><Problem error={error} onRetry={() => void refetch()} /></PageRow>}
      {overview.shown === 0 ? (
        <Section label="Campaigns"><FilteredToNothing overview={overview} filter={filter} onLoosen={(word) => set({ [word]: null })} onAll={() => set({ state: null, rig: null, sensor: null, search: null })} /></Section>
      ) : (
        tables.map((table) => (
          <Table key={table.place} table={table} filter={filter} sort={sort} spanMs={spanMs} setSpans={setSpans} onSort={(next) => set({ sort: next })} />
        ))
      )}
    </>
  );
}

type TableProps = {
  table: (typeof PLACES)[number];
  filter: ReturnType<typeof useFilter>["filter"];
  sort: string | null;
  spanMs: number;
  setSpans: (change: (before: Partial<Record<Place, number>>) => Partial<Record<Place, number>>) => void;
  onSort: (sort: string) => void;
};

function Table({ table, filter: { rigId, sensorId, search }, sort, spanMs, setSpans, onSort }: TableProps) {
  const { place, head, end, note } = table;
  const sorted = sortOf(table, sort);
  const onSpan = useCallback((span: number) => setSpans((before) => (before[place] === span ? before : { ...before, [place]: span })), [place, setSpans]);
  return (
    <Section head={head} note={note}>
      <CampaignsTable label={head} end={end} ask={{ state: place, rigId, sensorId, search, sort: sorted, limit: PAGE[place] }} sort={sorted} onSort={onSort} spanMs={spanMs} onSpan={onSpan} />
    </Section>
  );
}
