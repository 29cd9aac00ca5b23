import Link from "next/link";
import { RunStrip } from "@/components/strip/run-strip";
import type { StripInput } from "@/components/strip/strip-input";
import type { TableColumn } from "@/components/ui/data-table";
import { F0 } from "@/components/ui/quantity";
import { StateMark } from "@/components/ui/state-mark";
import type { CampaignItem } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatUncertain, plural } from "@/lib/format";
import { ShiftOnLimit } from "./shift-on-limit";
import { endOf } from "./end-words";
import { WeeksHead } from "./weeks-head";

export type CampaignRow = {
  campaign: CampaignItem;
  strip: StripInput | undefined;
  /** All strips of the page have one scale. */
  spanMs: number;
  /** Milliseconds, of the answer. */
  asOf: number;
};

/** One set of columns for all tables of the page; only the head of the end and the scale of the strips differ. */
export const columnsFor = ({ end, spanMs }: { end: string; spanMs: number }): TableColumn<CampaignRow>[] => [
  { id: "state", head: "State", slot: "b", width: 124, cell: ({ campaign }) => <StateMark state={campaign.word} /> },
  {
    id: "name",
    head: "Campaign",
    slot: "a",
    sortable: true,
    width: 210,
    cell: ({ campaign }) => (
      <>
        <span className="line-1 overflow-hidden text-ellipsis"><Link href={`/campaigns/${campaignCode(campaign.id)}`} className="font-semibold">{campaignCode(campaign.id)}</Link> {campaign.name}</span>
        <span className="line-2">{[campaign.sensor, campaign.setAside ? "set aside" : campaign.rig].filter(Boolean).join(", ") || "imported"}</span>
      </>
    ),
  },
  { id: "start", head: <WeeksHead spanMs={spanMs} />, slot: "w", cell: (row) => <Run {...row} /> },
  {
    id: "repeats",
    head: "Cycles",
    slot: "c",
    sortable: true,
    width: 150,
    cell: ({ campaign: { cycle, progress } }) => (
      <>
        <span className="line-1">{progress.cycles === null ? (cycle > 0 ? formatCount(cycle) : "") : `${formatCount(cycle)} of ${formatCount(progress.cycles)}`}</span>
        <span className="line-2">{repeatsOf(progress)}</span>
      </>
    ),
  },
  {
    id: "end",
    head: end,
    slot: "d",
    sortable: true,
    width: 150,
    cell: ({ campaign, asOf }) => {
      const { text, note } = endOf(campaign, asOf);
      return (
        <>
          <span className="line-1">{text}</span>
          {note && <span className="line-2" title={note}>{note}</span>}
        </>
      );
    },
  },
  {
    id: "shift",
    head: <>Last <F0 /> shift / mHz</>,
    slot: "x",
    align: "right",
    width: 122,
    cell: ({ campaign: { air } }) =>
      air ? (
        <>
          <span className="line-1">{formatUncertain(air.shiftMHz, air.u, { signed: true, decimals: 1 })}</span>
          {air.limitMHz !== null && <span className="line-2"><ShiftOnLimit shift={air.shiftMHz} limit={air.limitMHz} unit="mHz" /></span>}
        </>
      ) : (
        <span className="text-ink2">none yet</span>
      ),
  },
];

function repeatsOf({ repeats, repeatsPlanned }: CampaignItem["progress"]): string {
  if (repeatsPlanned === null) return repeats === 0 ? "" : `${formatCount(repeats)} ${plural(repeats, "repeat")}`;
  return repeats === 0 ? `${formatCount(repeatsPlanned)} repeats` : `${formatCount(repeats)} of ${formatCount(repeatsPlanned)} repeats`;
}

function Run({ campaign, strip, spanMs }: CampaignRow) {
  if (!strip) return <div className="h-12" />;
  const to = new Date(Date.parse(strip.from) + spanMs).toISOString();
  return <RunStrip {...strip} to={to} size="row" zone={campaign.timeZone} label={`Run of ${campaignCode(campaign.id)}${campaign.rig ? ` on ${campaign.rig}` : ""}`} />;
}
