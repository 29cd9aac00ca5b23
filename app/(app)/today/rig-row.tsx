"use client";

import Link from "next/link";
import { useMemo } from "react";
import { RunStrip } from "@/components/strip/run-strip";
import { F0, Q } from "@/components/ui/quantity";
import { StateMark } from "@/components/ui/state-mark";
import type { CampaignItem } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { formatUncertain } from "@/lib/format";
import { formatAgo, formatDayTime, formatPlusMinus, formatRecent } from "@/lib/format-time";
import type { TodayRig } from "@/lib/today/schema";
import { stripInputIn } from "../to-strip-input";
import type { DaysShown } from "./on-the-rigs";

const DAY_MS = 86_400_000;
const STRIP_HEIGHT = 92;

type RigRowProps = { rig: TodayRig; strip?: StripAnswer; days: DaysShown; /** The rig's clock is elsewhere in time than others'. */ ownTime: boolean; now: string };

export function RigRow({ rig, strip, days, ownTime, now }: RigRowProps) {
  const { campaign, name, timeZone } = rig;
  const rigNow = strip?.now ?? rig.now ?? now;
  const silentSince = rig.silent && rig.clock === "real" ? (rig.lastContactAt ?? undefined) : undefined;
  const input = useMemo(() => {
    const at = Date.parse(rigNow);
    const window = { from: new Date(at - days.back * DAY_MS).toISOString(), to: new Date(at + days.ahead * DAY_MS).toISOString(), silentSince };
    return strip && { ...stripInputIn(strip, window), now: rigNow };
  }, [strip, rigNow, days.back, days.ahead, silentSince]);
  if (!campaign) return null;

  const code = campaignCode(campaign.id);
  return (
    <div className="page-row rig-row">
      <div className="margin">
        <h3><Link href={`/rigs/${rig.id}`} className="no-underline hover:underline">{name}</Link></h3>
        <div><Link href={`/campaigns/${code}`}>{code}</Link>, {campaign.sensor}</div>
        <div className="text-ink3">{ownTime && rig.now ? formatDayTime(rig.now, timeZone) : rig.lastContactAt ? `agent seen ${formatAgo(rig.lastContactAt, now)}` : "agent never seen"}</div>
      </div>
      <div className="rig-columns">
        <div style={{ minHeight: input ? undefined : STRIP_HEIGHT }}>
          {input && <RunStrip {...input} size="today" zone={timeZone} label={`Run of ${code}, ${campaign.name}, on ${name}`} />}
        </div>
        <div className="rig-now">
          <StateMark state={campaign.word} needsPerson={campaign.word === "Halted" && rig.takenOnBy === null}>{stateText(rig, campaign, now)}</StateMark>
          {campaign.last && (
            <div className="num text-ink">
              <F0 /> {formatUncertain(campaign.last.f0Hz, campaign.last.f0U, { decimals: 4 })} Hz&ensp;<Q /> {formatUncertain(campaign.last.q, campaign.last.qU, { decimals: 2 })}
            </div>
          )}
          <div className="num">{endText(campaign)}</div>
        </div>
      </div>
    </div>
  );
}

function stateText({ doing, parked, silent, lastContactAt, timeZone, takenOnBy }: TodayRig, { word, setAside }: CampaignItem, now: string): string {
  if (silent && lastContactAt) return `Silent since ${formatRecent(lastContactAt, timeZone, now).replace("Today ", "")}`;
  if (doing) return doing;
  if (setAside) return `${word}, set aside`;
  if (word === "Halted" && takenOnBy) return `Halted, ${takenOnBy} has it`;
  return parked ? `${word}, parked in air` : word;
}

function endText({ expectedEnd, word, timeZone }: CampaignItem): string {
  if (!expectedEnd) return `End unknown while ${word.toLowerCase()}`;
  const { at, earliest, latest } = expectedEnd;
  return `Ends ${formatDayTime(at, timeZone, at)} ${formatPlusMinus((Date.parse(latest) - Date.parse(earliest)) / 2000)}`;
}
