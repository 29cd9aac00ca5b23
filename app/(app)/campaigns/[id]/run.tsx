"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { RunStrip } from "@/components/strip/run-strip";
import { Button } from "@/components/ui/button";
import { PhaseChip, TextureChip } from "@/components/ui/phase-chip";
import { Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { seriesOptions, stripOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { formatDayTime } from "@/lib/format-time";
import { toStripInput } from "../../to-strip-input";

type RunProps = { campaign: CampaignAnswer; window?: { from: string; to: string }; onWindow: (from: string, to: string) => void; onWhole: () => void };

const TRACE_POINTS = 1500;

/** The run strip with its reading line; a drag over it sets the window of all plots. */
export function Run({ campaign, window, onWindow, onWhole }: RunProps) {
  const { data: strip, error, refetch } = useQuery(stripOptions(campaign.id));
  const silent = campaign.holds.find(({ reason, releasedAt }) => reason === "silence" && !releasedAt)?.since;
  const { data: air } = useQuery({ ...seriesOptions(campaign.id, { medium: "air", quantity: "f0", points: TRACE_POINTS }), enabled: campaign.media.length > 0 });
  const input = useMemo(() => strip && toStripInput(strip, { campaignId: campaign.id, silentSince: silent, air }), [strip, campaign.id, silent, air]);
  return (
    <Section head="Run" note="Height is the liquid level in the cell. Below it, the air reference against the baseline." legend={strip && <Legend strip={strip} />}>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      {!input ? (
        !error && <Loading label="the run" height={220} />
      ) : input.segments.length === 0 ? (
        <Empty>Nothing is planned that can be drawn: the rig’s agent has not said yet what the rig can do.</Empty>
      ) : (
        <RunStrip {...input} size="campaign" zone={campaign.timeZone} label={`Run of ${campaignCode(campaign.id)}${campaign.rig ? ` on ${campaign.rig}` : ""}`} onWindow={onWindow} />
      )}
      {window && (
        <p className="small mt-2 flex flex-wrap items-center gap-x-3 text-ink2">
          The plots show {formatDayTime(window.from, campaign.timeZone, campaign.now)} to {formatDayTime(window.to, campaign.timeZone, campaign.now)}.
          <Button small look="link" onClick={onWhole}>Whole run</Button>
        </p>
      )}
    </Section>
  );
}

function Legend({ strip: { liquids, segments } }: { strip: StripAnswer }) {
  const has = (kind: string) => segments.some((segment) => segment.kind === kind);
  return (
    <>
      <span><PhaseChip kind="air" /> Air reference</span>
      {liquids.map(({ slot, name, letter, tint }) => <span key={slot}><PhaseChip kind="liquid" letter={letter} tint={tint} /> {name}</span>)}
      {has("clean") && <span><TextureChip kind="clean" /> Clean</span>}
      {has("dry") && <span><TextureChip kind="dry" /> Dry</span>}
      {has("held") && <span><TextureChip kind="held" /> Held</span>}
    </>
  );
}
