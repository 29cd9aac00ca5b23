"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Empty } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { importsOptions } from "@/lib/imports/client";
import type { ImportRunAnswer } from "@/lib/imports/schema";

const WORDS: Record<ImportRunAnswer["state"], string> = { receiving: "Arriving", waiting: "Waiting", running: "Importing", done: "Imported", refused: "Refused", cancelled: "Ended by a person" };

type Row = { run: ImportRunAnswer; zone: string };

const COLUMNS: readonly TableColumn<Row>[] = [
  { id: "name", head: "Name", slot: "a", cell: ({ run }) => <Link href={`/import/${run.id}`}>{run.name}</Link> },
  { id: "state", head: "State", slot: "b", width: 140, cell: ({ run }) => WORDS[run.state] },
  { id: "campaign", head: "Campaign", slot: "d", width: 100, cell: ({ run }) => run.state === "done" && <Link href={`/campaigns/${campaignCode(run.campaignId)}`}>{campaignCode(run.campaignId)}</Link> },
  { id: "rows", head: "Rows", slot: "x", align: "right", width: 100, cell: ({ run }) => run.state === "done" && formatCount(run.rowsStored) },
  { id: "file", head: "File", slot: "x", cell: ({ run }) => run.fileName },
  { id: "when", head: "Sent", slot: "c", width: 160, cell: ({ run, zone }) => <span className="num">{formatDayTime(run.createdAt, zone, run.now)}</span> },
  { id: "by", head: "By", slot: "x", width: 140, cell: ({ run }) => run.by },
];

/** What was imported so far, the newest first. */
export function ImportsTable({ zone }: { zone: string }) {
  const { data, error, refetch } = useQuery(importsOptions());
  return (
    <DataTable
      label="Imports"
      columns={COLUMNS}
      rows={data?.items.map((run) => ({ run, zone }))}
      rowKey={({ run }) => run.id}
      error={error}
      onRetry={() => void refetch()}
      empty={<Empty>Nothing has been imported yet.</Empty>}
    />
  );
}
