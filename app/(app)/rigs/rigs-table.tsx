"use client";

import Link from "next/link";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { StateMark } from "@/components/ui/state-mark";
import { NO_VALUE } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import type { RigAnswer } from "@/lib/rigs/schema";
import { rigWord } from "./rig-word";

const COLUMNS: readonly TableColumn<RigAnswer>[] = [
  {
    id: "rig",
    head: "Rig",
    slot: "a",
    cell: (rig) => (
      <>
        <Link href={`/rigs/${rig.id}`} className="font-semibold">{rig.name}</Link>
        <span className="line-2">{limitsOf(rig)}</span>
      </>
    ),
  },
  {
    id: "state",
    head: "State",
    slot: "b",
    cell: (rig) => (rig.campaign ? <StateMark state={rigWord(rig)} /> : <span className="text-ink2">Free</span>),
  },
  {
    id: "campaign",
    head: "Campaign",
    slot: "c",
    cell: ({ campaign }) =>
      campaign ? (
        <>
          <Link href={`/campaigns/${campaign.id}`}>{campaign.name}</Link>
          <span className="line-2">{campaign.takenOver ? "taken over by hand" : (campaign.cursorText ?? campaign.sensorSerial)}</span>
        </>
      ) : (
        NO_VALUE
      ),
  },
  {
    id: "mounted",
    head: "Mounted",
    slot: "x",
    cell: ({ mounts }) => (mounts.length > 0 ? mounts.map(({ serial }) => serial).join(", ") : NO_VALUE),
  },
  {
    id: "end",
    head: "Planned end",
    slot: "d",
    align: "right",
    cell: ({ campaign, timeZone }) => (campaign?.plannedEnd ? formatDayTime(campaign.plannedEnd, timeZone) : NO_VALUE),
  },
  { id: "queued", head: "In line", slot: "x", align: "right", cell: ({ queued }) => queued },
];

export function RigsTable({ rigs, refreshing }: { rigs: readonly RigAnswer[]; refreshing: boolean }) {
  return <DataTable label="Rigs" columns={COLUMNS} rows={rigs} rowKey={({ id }) => id} rowHref={({ id }) => `/rigs/${id}`} refreshing={refreshing} tall />;
}

function limitsOf({ abilities, ports }: RigAnswer): string {
  const temperatures =
    abilities?.minTemperatureC !== undefined && abilities.maxTemperatureC !== undefined ? `${abilities.minTemperatureC} to ${abilities.maxTemperatureC} °C, ` : "";
  return `${temperatures}${ports.length} ports`;
}
