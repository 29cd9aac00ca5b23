"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo } from "react";
import { LinkButton } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Symbol } from "@/components/ui/quantity";
import { Empty } from "@/components/ui/states";
import { formatUncertain, formatVolume, NO_VALUE } from "@/lib/format";
import { formatDay } from "@/lib/format-time";
import { lotsOfLiquidOptions } from "@/lib/liquids/client";
import type { LiquidAnswer, LotAnswer } from "@/lib/liquids/schema";

type LotsTableProps = { liquid: LiquidAnswer; mayEdit: boolean; zone: string; now: string };

export function LotsTable({ liquid, mayEdit, zone, now }: LotsTableProps) {
  const { data, error, refetch, isRefetching } = useQuery(lotsOfLiquidOptions(liquid.id));
  const columns = useMemo(() => columnsAt(zone, now), [zone, now]);
  const newLot = mayEdit && <LinkButton href={`/liquids/${liquid.id}/lots/new`}>New lot</LinkButton>;
  return (
    <DataTable
      label="Lots"
      columns={columns}
      rows={data?.items}
      rowKey={({ id }) => id}
      error={error}
      onRetry={() => void refetch()}
      refreshing={isRefetching}
      empty={<Empty actions={newLot}>No lot of {liquid.name} has been recorded yet.</Empty>}
    />
  );
}

const columnsAt = (zone: string, now: string): TableColumn<LotAnswer>[] => [
  { id: "code", head: "Lot", slot: "a", cell: ({ code }) => <b>{code}</b> },
  { id: "received", head: "Received", slot: "c", cell: ({ receivedAt }) => (receivedAt ? formatDay(receivedAt, zone, now) : NO_VALUE) },
  { id: "certificate", head: "Certificate", slot: "x", cell: ({ certificate }) => (certificate.length > 0 ? `${certificate.length} ${certificate.length === 1 ? "point" : "points"}` : "none") },
  { id: "density", head: <><Symbol name="ρ" /> certified / kg/m³</>, slot: "b", align: "right", cell: ({ certificate }) => densityOf(certificate) },
  { id: "expires", head: "Expires", slot: "d", align: "right", cell: ({ expiresAt }) => expiry(expiresAt, zone, now) },
  { id: "where", head: "Where", slot: "w", cell: ({ ports }) => <Where ports={ports} /> },
  { id: "campaigns", head: "Campaigns", slot: "x", align: "right", cell: ({ campaigns }) => campaigns },
];

/** The certified point nearest 20 °C. */
function densityOf(certificate: LotAnswer["certificate"]): string {
  const [point] = [...certificate].sort((a, b) => Math.abs(a.temperatureC - 20) - Math.abs(b.temperatureC - 20));
  return point ? `${formatUncertain(point.densityKgM3, point.uDensityKgM3)} at ${point.temperatureC} °C` : NO_VALUE;
}

function expiry(expiresAt: string | null, zone: string, now: string) {
  if (!expiresAt) return NO_VALUE;
  return expiresAt <= now ? <span className="text-ink2">expired {formatDay(expiresAt, zone, now)}</span> : formatDay(expiresAt, zone, now);
}

function Where({ ports }: { ports: LotAnswer["ports"] }) {
  if (ports.length === 0) return "not on a rig";
  return (
    <>
      {ports.map(({ rigId, rigName, port, remainingMl }, index) => (
        <span key={`${rigId}-${port}`}>
          {index > 0 && "; "}
          <Link href={`/rigs/${rigId}#bottles`}>{rigName}, port {port}</Link> <span className="num">{formatVolume(remainingMl)}</span>
        </span>
      ))}
    </>
  );
}
