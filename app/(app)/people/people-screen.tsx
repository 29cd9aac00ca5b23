"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { More } from "@/components/ui/more";
import { PageSentence, Section } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import { capitalised, inWords, plural } from "@/lib/format";
import type { Laboratory } from "@/lib/laboratory";
import { invitationsOptions, peopleOptions } from "@/lib/people/client";
import { InvitationsTable } from "./invitations-table";
import { InviteDialog } from "./invite-dialog";
import { PeopleTable } from "./people-table";

type Props = { myId: string; laboratory: Laboratory; now: string };

export function PeopleScreen({ myId, laboratory, now }: Props) {
  const [inviting, setInviting] = useState(false);
  const people = useInfiniteQuery(peopleOptions());
  const invitations = useInfiniteQuery(invitationsOptions());
  const persons = people.data?.pages.flatMap(({ items }) => items);
  const asked = invitations.data?.pages.flatMap(({ items }) => items).filter(({ state }) => state === "open" || state === "expired");
  if (!persons || !asked) {
    const error = people.error ?? invitations.error;
    return <PageSentence>{error ? <Problem error={error} onRetry={() => void people.refetch()} /> : <Loading label="the people" />}</PageSentence>;
  }

  const here = persons.filter(({ closedAt }) => !closedAt).length;
  const open = asked.filter(({ state }) => state === "open").length;
  return (
    <>
      <PageSentence
        margin={<b className="text-ink">{laboratory.name}</b>}
        actions={<Button look="primary" onClick={() => setInviting(true)}>Invite a person</Button>}
      >
        {capitalised(inWords(here))} {plural(here, "person", "people")}, {open === 0 ? "no invitation" : `${inWords(open)} ${plural(open, "invitation")}`} open.
      </PageSentence>
      <Section
        head="People"
        note={
          <>
            <p>A role can be changed in place. A person who leaves is closed, never removed, so that old records keep their name.</p>
            <ul className="mt-2 grid gap-1.5">
              <li><b className="text-ink">Viewer</b> reads.</li>
              <li><b className="text-ink">Operator</b> answers tasks and alarms, loads, mounts, pauses.</li>
              <li><b className="text-ink">Researcher</b> plans, starts, stops, signs.</li>
              <li><b className="text-ink">Administrator</b> keeps people and rigs.</li>
            </ul>
          </>
        }
      >
        <PeopleTable people={persons} myId={myId} zone={laboratory.timeZone} now={now} />
        <More hasMore={people.hasNextPage} busy={people.isFetchingNextPage} onMore={() => void people.fetchNextPage()}>More people</More>
      </Section>
      <Section head="Invitations" note="A link for one person, good for seven days.">
        <InvitationsTable invitations={asked} zone={laboratory.timeZone} now={now} />
        <More hasMore={invitations.hasNextPage} busy={invitations.isFetchingNextPage} onMore={() => void invitations.fetchNextPage()}>Earlier ones</More>
      </Section>
      <InviteDialog open={inviting} onOpenChange={setInviting} />
    </>
  );
}
