"use client";

import Link from "next/link";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Head, Section } from "@/components/ui/page";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount } from "@/lib/format";
import { formatDayTime, formatPlusMinus, formatRecent, formatTime } from "@/lib/format-time";
import type { TodayAnswer, TodayRig } from "@/lib/today/schema";

type Ending = TodayRig & { campaign: NonNullable<TodayRig["campaign"]> };

const COLUMNS: readonly TableColumn<Ending>[] = [
  { id: "campaign", head: "Campaign", slot: "a", cell: ({ campaign }) => <Link href={`/campaigns/${campaignCode(campaign.id)}`}>{campaignCode(campaign.id)} {campaign.name}</Link> },
  { id: "rig", head: "Rig", slot: "b", cell: ({ name }) => name },
  {
    id: "repeats",
    head: "Repeats",
    slot: "d",
    align: "right",
    cell: ({ campaign: { progress } }) => `${formatCount(progress.repeats)}${progress.repeatsPlanned === null ? "" : ` of ${formatCount(progress.repeatsPlanned)}`}`,
  },
  { id: "end", head: "Expected end", slot: "c", align: "right", cell: ({ campaign }) => endText(campaign) },
  { id: "then", head: "Then", slot: "x", align: "right", cell: ({ next }) => (next ? <Link href={`/campaigns/${campaignCode(next.id)}`}>{campaignCode(next.id)}</Link> : <span className="text-ink3">nothing</span>) },
];

/** What finishes when, and what happened while the lab was empty. */
export function NextAndLast({ today: { rigs, log, laboratory, now } }: { today: TodayAnswer }) {
  const ending = rigs.filter((rig): rig is Ending => rig.campaign !== null).toSorted((a, b) => endMs(a) - endMs(b));
  const zone = laboratory.timeZone;
  return (
    <Section head="Next and last" note="What finishes when, and what happened while the lab was empty.">
      <div className="next-and-last">
        <div>
          <Head>Ends next</Head>
          <DataTable label="Ends next" columns={COLUMNS} rows={ending} rowKey={({ id }) => id} empty={<p className="text-ink2">Nothing is under way.</p>} />
        </div>
        <div>
          <Head>Since yesterday {formatTime(log.since, zone)}</Head>
          {log.items.length === 0 ? (
            <p className="text-ink2">Nothing out of the ordinary.</p>
          ) : (
            <table className="data-table log" aria-label="What happened">
              <tbody>
                {log.items.map(({ at, rig, text, campaignId }, i) => (
                  <tr key={`${at}${i}`}>
                    <td className="num">{formatRecent(at, zone, now).replace("Today ", "")}</td>
                    <td>{campaignId ? <Link href={`/campaigns/${campaignCode(campaignId)}`}>{rig}</Link> : rig}: {text}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          )}
        </div>
      </div>
    </Section>
  );
}

const endMs = ({ campaign: { expectedEnd } }: Ending) => (expectedEnd ? Date.parse(expectedEnd.at) : Infinity);

function endText({ expectedEnd, word, timeZone }: Ending["campaign"]) {
  if (!expectedEnd) return `unknown while ${word.toLowerCase()}`;
  const { at, earliest, latest } = expectedEnd;
  return `${formatDayTime(at, timeZone, at)} ${formatPlusMinus((Date.parse(latest) - Date.parse(earliest)) / 2000)}`;
}
