"use client";

import { useQuery } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { PageSentence, Section } from "@/components/ui/page";
import { Empty, Loading, Offline, Problem } from "@/components/ui/states";
import { formatDay, formatTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { todayOptions } from "@/lib/today/client";
import type { TodayAnswer } from "@/lib/today/schema";
import { todaySentence } from "@/lib/today/sentence";
import { NextAndLast } from "./next-and-last";
import { OnTheRigs } from "./on-the-rigs";
import { TodaySlips } from "./today-slips";

/** What runs, what needs a person, what finishes when. */
export function TodayScreen({ role }: { role: Role }) {
  const { data: today, error, refetch } = useQuery(todayOptions());
  if (!today) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the rigs" height={320} />}</Section>;

  const { laboratory, now, rigs } = today;
  return (
    <>
      <PageSentence
        margin={
          <>
            <div className="today-date">{formatDay(now, laboratory.timeZone, now)}</div>
            <div className="today-laboratory">{laboratory.name}</div>
          </>
        }
      >
        {sentenceOf(today)}
      </PageSentence>
      {error && <div className="page-row"><div className="margin" /><Offline asOf={formatTime(now, laboratory.timeZone)} onTryNow={() => void refetch()} /></div>}
      <TodaySlips today={today} role={role} />
      {rigs.length === 0 ? (
        <Section head="On the rigs">
          <Empty actions={may(role, "edit rigs") && <LinkButton look="primary" href="/rigs/new">New rig</LinkButton>} note="A rig's agent asks for steps once it has a token.">
            Here the runs of all rigs stand on one axis of time.
          </Empty>
        </Section>
      ) : (
        <>
          <OnTheRigs today={today} role={role} />
          <NextAndLast today={today} />
        </>
      )}
    </>
  );
}

function sentenceOf({ rigs, now, alarms }: TodayAnswer): string {
  const openAlarms = alarms.filter(({ state, shelvedUntil }) => state === "unacknowledged" && !shelvedUntil).length;
  return todaySentence({ now, openAlarms, rigs: rigs.map(({ campaign, ...rig }) => ({ ...rig, word: campaign?.word })) });
}
