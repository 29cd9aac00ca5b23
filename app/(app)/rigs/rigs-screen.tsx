"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { More } from "@/components/ui/more";
import { PageSentence, PageTitle, Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { capitalised, inWords, listOf, plural } from "@/lib/format";
import { may, type Role } from "@/lib/permissions";
import { rigsOptions } from "@/lib/rigs/client";
import type { RigAnswer } from "@/lib/rigs/schema";
import { AgentsTable } from "./agents-table";
import { RigBottles } from "./rig-bottles";
import { RigsTable } from "./rigs-table";
import { rigWord } from "./rig-word";

/** Who runs what, whether each agent is heard, and what stands on the ports. */
export function RigsScreen({ role }: { role: Role }) {
  const { data, error, refetch, hasNextPage, isFetchingNextPage, fetchNextPage, isRefetching, dataUpdatedAt } = useInfiniteQuery(rigsOptions());
  const rigs = data?.pages.flatMap(({ items }) => items);
  const newRig = may(role, "edit rigs") && <LinkButton href="/rigs/new">New rig</LinkButton>;

  if (!rigs || rigs.length === 0) {
    return (
      <>
        <PageTitle actions={newRig}>Rigs</PageTitle>
        <Section label="Rigs">
          {rigs ? (
            <Empty note={newRig ? undefined : "An administrator makes rigs."}>No rig has been made yet.</Empty>
          ) : error ? (
            <Problem error={error} onRetry={() => void refetch()} />
          ) : (
            <Loading label="the rigs" height={200} />
          )}
        </Section>
      </>
    );
  }
  return (
    <>
      <PageSentence
        margin={<b className="text-ink">{rigs.length}{hasNextPage && "+"} {plural(rigs.length, "rig")}</b>}
        actions={
          <>
            {may(role, "edit campaigns") && <LinkButton look="primary" href="/campaigns/new">Queue a campaign</LinkButton>}
            {newRig}
          </>
        }
      >
        {sentenceOf(rigs)}
      </PageSentence>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      <Section head="What runs" note="Times are those of each rig.">
        <RigsTable rigs={rigs} refreshing={isRefetching} />
        <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>More rigs</More>
      </Section>
      <Section head="Agents" note="Each line is ten minutes, its height the number of contacts. Silence shortens or removes it.">
        <AgentsTable rigs={rigs} asOf={dataUpdatedAt} />
      </Section>
      <Section head="Bottles" note="Level now. Waste is what is in the container.">
        <div className="grid gap-x-8 gap-y-6 grid-cols-[repeat(auto-fill,minmax(330px,1fr))]">
          {rigs.map((rig) => <RigBottles key={rig.id} rig={rig} />)}
        </div>
      </Section>
    </>
  );
}

function sentenceOf(rigs: readonly RigAnswer[]): string {
  const measuring = rigs.filter((rig) => rigWord(rig) === "Measuring").length;
  const halted = rigs.filter((rig) => rigWord(rig) === "Halted").map(({ name }) => name);
  const free = rigs.filter(({ campaign }) => !campaign).map(({ name }) => name);
  const parts = [`${capitalised(inWords(measuring))} ${plural(measuring, "rig is", "rigs are")} measuring`];
  if (free.length > 0) parts.push(`${free.length > 3 ? `${inWords(free.length)} are` : `${listOf(free)} ${plural(free.length, "is", "are")}`} free`);
  const needs = halted.length > 0 ? ` ${listOf(halted)} halted and ${plural(halted.length, "needs", "need")} a person.` : "";
  return `${parts.join("; ")}.${needs}`;
}
