"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { More } from "@/components/ui/more";
import { Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { eventsOptions } from "@/lib/campaigns/client";
import { asSentence } from "@/lib/format";
import { formatRecent } from "@/lib/format-time";

const FIRST = 8;

/** What happened, the newest first, at the rig's time. */
export function Log({ campaign: { id, state, timeZone, now } }: { campaign: CampaignAnswer }) {
  const [all, setAll] = useState(false);
  const live = state === "running" || state === "held" || state === "queued";
  const { data, error, refetch, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(eventsOptions(id, live));
  const events = data?.pages.flatMap(({ items }) => items);
  if (!events) return error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the log" height={180} />;
  if (events.length === 0) return <p className="text-ink2">Nothing has happened yet.</p>;
  const shown = all ? events : events.slice(0, FIRST);
  return (
    <div>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      <table className="data-table log" aria-label="Log">
        <thead className="visually-hidden"><tr><th scope="col">When</th><th scope="col">What, who</th></tr></thead>
        <tbody>
          {shown.map(({ id: eventId, at, clock, text, who }) => (
            <tr key={eventId}>
              <td className="num"><time dateTime={clock ?? at}>{formatRecent(clock ?? at, timeZone, now)}</time></td>
              <td>{asSentence(text)} <span className="text-ink2">{who}</span></td>
            </tr>
          ))}
        </tbody>
      </table>
      {!all && events.length > FIRST && <div className="table-foot"><Button small onClick={() => setAll(true)}>{hasNextPage ? "More entries" : `All ${events.length} entries`}</Button></div>}
      {all && <More hasMore={hasNextPage} busy={isFetchingNextPage} onMore={() => void fetchNextPage()}>Earlier entries</More>}
    </div>
  );
}
