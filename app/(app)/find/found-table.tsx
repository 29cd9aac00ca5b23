"use client";

import Link from "next/link";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import type { Found } from "@/lib/find/schema";

const COLUMNS: readonly TableColumn<Found>[] = [
  { id: "name", head: "Name", slot: "a", width: 420, cell: ({ name, href, retired }) => <Link href={href} className={retired ? "text-ink3" : "font-semibold"}>{name}</Link> },
  { id: "note", head: "About", slot: "c", cell: ({ note }) => <span className="text-ink2">{note}</span> },
];

export function FoundTable({ label, items }: { label: string; items: readonly Found[] }) {
  return <DataTable label={label} columns={COLUMNS} rows={items} rowKey={({ id }) => id} rowHref={({ href }) => href} />;
}
