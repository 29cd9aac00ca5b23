"use client";

import type { AlarmAnswer } from "@/lib/alarms/schema";
import { formatRecent } from "@/lib/format-time";

/** The alarm's record by time: what Longreed did, who took it on. */
export function WhatLongreedDid({ alarm: { events, actionText, timeZone }, now }: { alarm: AlarmAnswer; now: string }) {
  return (
    <div className="what-was-done">
      <h3>What was done</h3>
      <ul>
        {events.map(({ at, kind, text }, i) => (
          <li key={i}>
            <span className="num">{formatRecent(at, timeZone, now).replace("Today ", "")}</span>
            <span>{kind === "opened" ? (actionText ?? "Alarm opened") : text}</span>
          </li>
        ))}
      </ul>
    </div>
  );
}
