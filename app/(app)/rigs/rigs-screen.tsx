"use client";

import { useInfiniteQuery, useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { More } from "@/components/ui/more";
import { PageRow, PageSentence, PageTitle, Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { plural } from "@/lib/format";
import { may, type Role } from "@/lib/permissions";
import { rigsOptions, timelineOptions } from "@/lib/rigs/client";
import type { LaneAnswer } from "@/lib/rigs/timeline-schema";
import { AgentsTable } from "./agents-table";
import { BlockTimeDialog } from "./block-time-dialog";
import { RigBottles } from "./rig-bottles";
import { rigsSentence } from "./rigs-sentence";
import { useMoves } from "./use-moves";
import { WhoRunsWhat } from "./who-runs-what";

const NONE: readonly LaneAnswer[] = [];

/** Who runs what when, whether each agent is heard, and what stands on the ports. */
export function RigsScreen({ role }: { role: Role }) {
  const { data, error, refetch, hasNextPage, isFetchingNextPage, fetchNextPage, dataUpdatedAt } = useInfiniteQuery(rigsOptions());
  const timeline = useQuery(timelineOptions());
  const lanes = timeline.data?.items ?? NONE;
  const moves = useMoves(lanes);
  const [blocking, setBlocking] = useState(false);
  const rigs = data?.pages.flatMap(({ items }) => items);
  const mayEdit = may(role, "edit rigs");
  const hasNone = rigs?.length === 0;
  const newRig = mayEdit && <LinkButton look={hasNone ? "primary" : "plain"} href="/rigs/new">New rig</LinkButton>;

  if (!rigs || hasNone) {
    return (
      <>
        <PageTitle actions={newRig}>Rigs</PageTitle>
        <Section label="Rigs">
          {rigs ? (
            <Empty actions={newRig} note={newRig ? "Its agent gets steps once it has a token; what it can do, it says by itself." : "An administrator makes rigs."}>No rig has been made yet.</Empty>
          ) : error ? (
            <Problem error={error} onRetry={() => void refetch()} />
          ) : (
            <Loading label="the rigs" height={200} />
          )}
        </Section>
      </>
    );
  }
  const needsOf = new Map(lanes.map(({ rigId, needs }) => [rigId, needs]));
  return (
    <>
      <PageSentence
        margin={<b className="text-ink">{rigs.length}{hasNextPage && "+"} {plural(rigs.length, "rig")}</b>}
        actions={
          <>
            {may(role, "edit campaigns") && <LinkButton look="primary" href="/campaigns/new">Queue a campaign</LinkButton>}
            {mayEdit && <Button onClick={() => setBlocking(true)}>Block time</Button>}
            {newRig}
          </>
        }
      >
        {rigsSentence(moves.shown) || "Rigs"}
      </PageSentence>
      {(error ?? timeline.error) && <PageRow><Problem error={error ?? timeline.error} onRetry={() => void Promise.all([refetch(), timeline.refetch()])} /></PageRow>}
      {timeline.data ? <WhoRunsWhat lanes={lanes} rigs={rigs} moves={moves} role={role} /> : !timeline.error && <PageRow><Loading label="what runs when" height={300} /></PageRow>}
      <Section head="Agents" note="Each line is ten minutes, its height the number of contacts. Silence shortens or removes it.">
        <AgentsTable rigs={rigs} asOf={dataUpdatedAt} />
      </Section>
      <Section head="Bottles" note="Level now. The notch is what the campaign on the rig and those in line still need. Waste is read the other way: the notch is what will still come.">
        <div className="bottles">{rigs.map((rig) => <RigBottles key={rig.id} rig={rig} needs={needsOf.get(rig.id)} />)}</div>
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More rigs</More>
      </Section>
      {blocking && <BlockTimeDialog rigs={rigs} onClose={() => setBlocking(false)} />}
    </>
  );
}
