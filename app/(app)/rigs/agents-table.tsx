"use client";

import { useQuery } from "@tanstack/react-query";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { formatNumber, NO_VALUE } from "@/lib/format";
import { formatAgo, formatDuration } from "@/lib/format-time";
import { contactsOptions } from "@/lib/rigs/client";
import type { RigAnswer } from "@/lib/rigs/schema";
import { Contacts } from "./contacts";

type Row = { rig: RigAnswer; asOf: number; counts: readonly number[]; longestSilenceS: number | null };

const COLUMNS: readonly TableColumn<Row>[] = [
  { id: "rig", head: "Rig", slot: "a", width: 130, cell: ({ rig }) => rig.name },
  { id: "contacts", head: "Contacts, 24 h", slot: "w", cell: ({ rig, counts }) => <Contacts name={rig.name} counts={counts} /> },
  { id: "seen", head: "Seen", slot: "b", align: "right", width: 96, cell: ({ rig, asOf }) => (rig.lastContactAt ? formatAgo(rig.lastContactAt, asOf) : "never") },
  { id: "silence", head: "Longest silence", slot: "c", align: "right", width: 122, cell: ({ longestSilenceS }) => (longestSilenceS === null ? NO_VALUE : formatDuration(longestSilenceS)) },
  { id: "state", head: "Says", slot: "d", width: 150, cell: ({ rig }) => rig.agent?.message ?? rig.agent?.state ?? NO_VALUE },
  { id: "clock", head: "Clock / s", slot: "x", align: "right", width: 92, cell: ({ rig }) => clockOf(rig) },
  { id: "agent", head: "Agent", slot: "x", align: "right", width: 170, cell: ({ rig: { agent } }) => (agent ? <span className="whitespace-normal">{agent.name} {agent.version}</span> : NO_VALUE) },
];

export function AgentsTable({ rigs, asOf }: { rigs: readonly RigAnswer[]; asOf: number }) {
  const { data: contacts } = useQuery(contactsOptions());
  const byRig = new Map(contacts?.items.map((heard) => [heard.rigId, heard]));
  const rows = rigs.map((rig): Row => ({ rig, asOf, counts: byRig.get(rig.id)?.counts ?? [], longestSilenceS: byRig.get(rig.id)?.longestSilenceS ?? null }));
  return <DataTable label="Agents" columns={COLUMNS} rows={rows} rowKey={({ rig }) => rig.id} />;
}

function clockOf({ clock, clockOffsetS }: RigAnswer): string {
  if (clock === "simulated") return "simulated";
  return clockOffsetS === null ? NO_VALUE : formatNumber(clockOffsetS, { decimals: 1, signed: true });
}
