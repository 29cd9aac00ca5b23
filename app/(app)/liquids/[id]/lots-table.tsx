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
import { LotLife } from "./lot-life";

type LotsTableProps = { liquid: LiquidAnswer; mayEdit: boolean; zone: string; now: string };

export function LotsTable({ liquid, mayEdit, zone, now }: LotsTableProps) {
  const { data, error, refetch, isRefetching } = useQuery(lotsOfLiquidOptions(liquid.id));
  const columns = useMemo(() => columnsAt(zone, now, mayEdit), [zone, now, mayEdit]);
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

const columnsAt = (zone: string, now: string, mayEdit: boolean): TableColumn<LotAnswer>[] => [
  { id: "code", head: "Lot", slot: "a", cell: ({ id, liquidId, code }) => (mayEdit ? <Link href={`/liquids/${liquidId}/lots/${id}/edit`} className="font-semibold">{code}</Link> : <b>{code}</b>) },
  { id: "received", head: "Received", slot: "c", cell: ({ receivedAt }) => (receivedAt ? formatDay(receivedAt, zone, now) : NO_VALUE) },
  { id: "left", head: "Left of", slot: "x", align: "right", cell: ({ ports }) => leftOf(ports) },
  { id: "density", head: <><Symbol name="ρ" /> certified / kg/m³</>, slot: "b", align: "right", cell: ({ certificate }) => densityOf(certificate) },
  { id: "viscosity", head: <><Symbol name="η" /> certified / mPa·s</>, slot: "x", align: "right", cell: ({ certificate }) => viscosityOf(certificate) },
  { id: "life", head: "Life", slot: "x", cell: ({ receivedAt, createdAt, expiresAt }) => <LotLife from={receivedAt ?? createdAt} expiresAt={expiresAt} now={now} zone={zone} /> },
  { id: "expires", head: "Expires", slot: "d", align: "right", cell: ({ expiresAt }) => expiry(expiresAt, zone, now) },
  { id: "where", head: "Where", slot: "w", cell: ({ ports }) => <Where ports={ports} /> },
];

/** What is left on ports; bottles in store are not measured. */
function leftOf(ports: LotAnswer["ports"]): string {
  if (ports.length === 0) return NO_VALUE;
  const sum = (of: "remainingMl" | "fullMl") => ports.reduce((total, port) => total + port[of], 0);
  return `${formatVolume(sum("remainingMl"))} of ${formatVolume(sum("fullMl"))}`;
}

const nearest20 = (certificate: LotAnswer["certificate"]) => certificate.toSorted((a, b) => Math.abs(a.temperatureC - 20) - Math.abs(b.temperatureC - 20));

function viscosityOf(certificate: LotAnswer["certificate"]): string {
  const point = nearest20(certificate).find(({ viscosityMPaS }) => viscosityMPaS !== undefined);
  return point?.viscosityMPaS === undefined ? NO_VALUE : `${formatUncertain(point.viscosityMPaS, point.uViscosityMPaS)} at ${point.temperatureC} °C`;
}

/** The certified point nearest 20 °C. */
function densityOf(certificate: LotAnswer["certificate"]): string {
  const [point] = nearest20(certificate);
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
