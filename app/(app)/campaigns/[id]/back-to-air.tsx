"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { Sparkline } from "@/components/charts/sparkline";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { PhaseChip } from "@/components/ui/phase-chip";
import { F0, Q } from "@/components/ui/quantity";
import { Empty } from "@/components/ui/states";
import type { BackToAirAnswer } from "@/lib/analysis/schema";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { backToAirOptions } from "@/lib/campaigns/client";
import { formatNumber, formatUncertain, NO_VALUE } from "@/lib/format";
import { formatRecent } from "@/lib/format-time";
import { ShiftOnLimit } from "../shift-on-limit";

type Item = BackToAirAnswer["items"][number];

const NEWEST = 12;

/** One row a clean: f0 and Q of the air reference that followed it, its shift on the limit, and its course. */
export function BackToAir({ campaign }: { campaign: CampaignAnswer }) {
  const { data, error, refetch, isRefetching } = useQuery(backToAirOptions(campaign.id));
  const [all, setAll] = useState(false);
  const columns = useMemo(() => columnsFor(campaign, data?.limitPpm ?? null), [campaign, data?.limitPpm]);
  const items = data?.items;
  const shown = all ? items : items?.slice(-NEWEST);
  return (
    <div>
      <DataTable
        label="the air references"
        columns={columns}
        rows={shown}
        rowKey={({ phaseId }) => phaseId}
        error={error}
        onRetry={() => void refetch()}
        refreshing={isRefetching}
        empty={<Empty>No air reference has ended yet.</Empty>}
      />
      {items && items.length > NEWEST && !all && <div className="table-foot"><Button small onClick={() => setAll(true)}>All {items.length} references</Button></div>}
      {items?.some(({ baselineComplete }) => !baselineComplete) && <p className="caption">The baseline is not complete yet; it still moves with each reference.</p>}
    </div>
  );
}

function columnsFor({ media, timeZone, now }: CampaignAnswer, limitPpm: number | null): TableColumn<Item>[] {
  const mediumOf = new Map(media.map((one) => [one.medium, one]));
  return [
    { id: "cycle", head: "Cycle", slot: "c", cell: ({ cycle, at }) => <>{cycle}<span className="line-2">{formatRecent(at, timeZone, now)}</span></> },
    {
      id: "after",
      head: "After",
      slot: "a",
      cell: ({ after }) => {
        const liquid = after ? mediumOf.get(after) : undefined;
        if (!after) return <span className="text-ink2">the beginning</span>;
        return <span className="inline-flex items-center gap-2">{liquid?.letter && liquid.tint && <PhaseChip kind="liquid" letter={liquid.letter} tint={liquid.tint} />}{liquid?.name ?? after}</span>;
      },
    },
    { id: "f0", head: <><F0 /> in air / Hz</>, slot: "x", align: "right", cell: ({ f0Hz, u }) => formatUncertain(f0Hz, u, { decimals: 4 }) },
    {
      id: "shift",
      head: "Shift / mHz",
      slot: "b",
      align: "right",
      cell: ({ f0Hz, baselineHz, shiftU }) => {
        if (baselineHz === null) return NO_VALUE;
        const shift = (f0Hz - baselineHz) * 1000;
        const limit = limitPpm === null ? null : limitPpm * 1e-3 * baselineHz;
        return (
          <>
            {formatUncertain(shift, shiftU === null ? null : shiftU * 1e-3 * baselineHz, { signed: true, decimals: 1 })}
            {limit !== null && <span className="line-2"><ShiftOnLimit shift={shift} limit={limit} unit="mHz" /></span>}
          </>
        );
      },
    },
    {
      id: "q",
      head: <Q />,
      slot: "d",
      align: "right",
      cell: ({ q, qU, qShiftPercent }) => (
        <>
          {q === null ? NO_VALUE : formatUncertain(q, qU, { decimals: 1 })}
          {qShiftPercent !== null && <span className="line-2">{formatNumber(qShiftPercent, { decimals: 2, signed: true })}&#8239;%</span>}
        </>
      ),
    },
    {
      id: "course",
      head: "In the phase",
      slot: "w",
      width: 150,
      cell: ({ courseMHz, cycle }) => <Sparkline label={`f0 less the phase value within the air reference of cycle ${cycle}`} values={courseMHz.map((value) => value ?? NaN)} band={{ low: 0, high: 0 }} unit="mHz" />,
    },
  ];
}
