"use client";

import Link from "next/link";
import { useMemo } from "react";
import { Lane } from "@/components/strip/lane";
import type { LaneRun } from "@/components/strip/lane-geometry";
import { campaignCode } from "@/lib/campaigns/code";
import { formatDay, formatDayTime } from "@/lib/format-time";
import type { LaneAnswer, LaneCampaign } from "@/lib/rigs/timeline-schema";
import { stripInputIn } from "../to-strip-input";
import { MoveHandle } from "./move-handle";
import type { Moves } from "./use-moves";

type RigLaneProps = {
  lane: LaneAnswer;
  /** The lane as it is stored, while another order of its line is tried. */
  stored?: LaneAnswer;
  window?: { from: string; to: string };
  moves?: Moves;
  rings?: readonly { at: string; label: string }[];
};

/** One rig's weeks. Queued campaigns can be moved where `moves` is given. */
export function RigLane({ lane, stored = lane, window, moves, rings }: RigLaneProps) {
  const from = window?.from ?? lane.from;
  const to = window?.to ?? lane.to;
  const runs = useMemo(() => lane.campaigns.map((campaign) => runOf(campaign, from, to)), [lane, from, to]);
  const byId = new Map(lane.campaigns.map((campaign) => [campaign.id, campaign]));
  return (
    <Lane
      label={`${lane.name}, ${formatDay(from, lane.timeZone, lane.now)} to ${formatDay(to, lane.timeZone, lane.now)}`}
      zone={lane.timeZone}
      from={from}
      to={to}
      now={lane.now}
      runs={runs}
      blocked={lane.blocked}
      rings={rings}
      nameOf={(key) => <NameOf campaign={byId.get(key)} />}
      handleOf={
        moves &&
        ((key, { pxPerMs }) => {
          const campaign = stored.campaigns.find(({ id, queued }) => queued && id === key);
          return campaign && <MoveHandle lane={stored} campaign={campaign} moves={moves} pxPerMs={pxPerMs} />;
        })
      }
    >
      <ul>
        {lane.campaigns.map((campaign) => <li key={campaign.id}>{inWords(campaign, lane)}</li>)}
        {lane.blocked.map(({ id, from: begin, to: end, why }) => <li key={id}>Blocked {formatDayTime(begin, lane.timeZone, lane.now)} to {formatDayTime(end, lane.timeZone, lane.now)}: {why}</li>)}
        {rings?.map(({ at, label }) => <li key={`${at}-${label}`}>A person is needed {formatDayTime(at, lane.timeZone, lane.now)}: {label}</li>)}
        {lane.campaigns.length === 0 && <li>Nothing is planned.</li>}
      </ul>
    </Lane>
  );
}

const runOf = ({ id, from: begin, end, strip }: LaneCampaign, from: string, to: string): LaneRun => {
  const { segments, halt } = stripInputIn({ ...strip, from, to, trace: [] }, { from, to });
  return { key: id, segments, from: begin, to: end.at, range: end.range, halt: halt?.open && halt.at >= from && halt.at <= to ? halt : undefined };
};

function NameOf({ campaign }: { campaign: LaneCampaign | undefined }) {
  if (!campaign) return null;
  if (campaign.id === "") return <><b className="text-ink">This campaign</b> {campaign.sensor}</>;
  const code = campaignCode(campaign.id);
  return <><Link href={`/campaigns/${code}`}>{code}</Link> {campaign.queued || campaign.word === "Measuring" ? "" : `${campaign.word.toLowerCase()}, `}{campaign.sensor}, {campaign.name}</>;
}

function inWords({ id, name, word, from, end }: LaneCampaign, { timeZone, now }: LaneAnswer): string {
  const time = (at: string) => formatDayTime(at, timeZone, now);
  const range = end.range ? `, between ${time(end.range.earliest)} and ${time(end.range.latest)}` : ", if what is held goes on now";
  return `${id === "" ? "This campaign" : `${campaignCode(id)}, ${name}`}, ${word}: from ${time(from)}, ends ${time(end.at)}${range}`;
}
