"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { AlarmMark } from "@/components/ui/alarm-mark";
import { alarmOptions } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { detailOf, titleOf } from "@/lib/alarms/words";
import { campaignCode } from "@/lib/campaigns/code";
import { capitalised } from "@/lib/format";
import { formatAgo, formatDuration, formatRecent } from "@/lib/format-time";
import { AlarmVerbs } from "./alarm-verbs";
import { LimitPlot } from "./limit-plot";
import { WhatLongreedDid } from "./what-longreed-did";

type AlarmRowProps = { alarm: AlarmAnswer; now: string; may: boolean; /** On its own page the head is the page's. */ alone?: boolean };

/** State and since when in the margin; what, where and how far; the values against the limit; what was done. */
export function AlarmRow({ alarm, now, may, alone }: AlarmRowProps) {
  const { data: detail } = useQuery({ ...alarmOptions(alarm.id), enabled: alarm.phaseId !== undefined });
  const { rig, campaign, campaignId, sensor, state, acknowledgedBy, shelvedUntil, timeZone } = alarm;
  const short = (at: string) => formatRecent(at, timeZone, now).replace("Today ", "");
  return (
    <section className="page-row alarm-row" aria-label={capitalised(titleOf(alarm))}>
      <div className="margin">
        <AlarmMark state={shelvedUntil ? "shelved" : state} by={acknowledgedBy} until={shelvedUntil && short(shelvedUntil)} />
        <div className="mt-1">{marginText(alarm, now, short)}</div>
      </div>
      <div className="body">
        <div>
          {!alone && <h2><Link href={`/alarms/${alarm.id}`} className="no-underline hover:underline">{capitalised(titleOf(alarm))}</Link></h2>}
          <div className="where">
            <Link href={`/rigs/${alarm.rigId}`}>{rig}</Link>
            {campaignId && <>, <Link href={`/campaigns/${campaignCode(campaignId)}`}>{campaignCode(campaignId)} {campaign}</Link></>}
            {sensor && `, ${sensor}`}
            {alarm.limitId && `, limit “${alarm.limitId}”`}
          </div>
          <p>{detailOf(alarm)}</p>
          {alarm.clearNote && <p>“{alarm.clearNote}”</p>}
          <AlarmVerbs alarm={alarm} now={now} may={may} />
        </div>
        <div>{detail?.series && detail.series.points.length > 0 && <LimitPlot series={detail.series} zone={timeZone} breach={!alarm.returnedAt && state !== "cleared"} />}</div>
        <WhatLongreedDid alarm={alarm} now={now} />
      </div>
    </section>
  );
}

function marginText({ openedAt, state, acknowledgedAt, returnedAt, shelvedUntil, clearedAt, clearedBy }: AlarmAnswer, now: string, short: (at: string) => string): string {
  const since = `since ${short(openedAt)}`;
  if (state === "cleared" && clearedAt) return `${short(openedAt)} to ${short(clearedAt)}${clearedBy ? `, by ${clearedBy}` : ", by itself"}.`;
  if (shelvedUntil) return `${since}, back ${formatAgo(shelvedUntil, now)}.`;
  if (state === "returned" && returnedAt) return `${short(openedAt)} to ${short(returnedAt)}.`;
  if (state === "acknowledged" && acknowledgedAt) return `${since}, taken ${short(acknowledgedAt)}. Not over yet.`;
  return `${since}, for ${formatDuration((Date.parse(now) - Date.parse(openedAt)) / 1000)}.`;
}
