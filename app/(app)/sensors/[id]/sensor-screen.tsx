"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo, useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { PageRow, PageTitle, Section, Vitals } from "@/components/ui/page";
import { F0, Q } from "@/components/ui/quantity";
import { Loading, Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatNumber, NO_VALUE } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import type { MountAnswer } from "@/lib/mounts/schema";
import { may, type Role } from "@/lib/permissions";
import { mountsOptions, sensorOptions } from "@/lib/sensors/client";
import { CampaignsOfSensor } from "./campaigns-of-sensor";
import { EndMountDialog } from "./end-mount-dialog";
import { MountDialog } from "./mount-dialog";
import { MountSpan } from "./mount-span";

export function SensorScreen({ sensorId, role, zone, now }: { sensorId: string; role: Role; zone: string; now: string }) {
  const { data: sensor, error, refetch } = useQuery(sensorOptions(sensorId));
  const mounts = useQuery(mountsOptions(sensorId));
  const first = mounts.data?.items.at(-1)?.from ?? now;
  const columns = useMemo(() => columnsIn({ zone, first, now }), [zone, first, now]);
  const [open, setOpen] = useState<"mount" | "end" | null>(null);
  if (!sensor) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the sensor" height={240} />}</Section>;

  const { serial, kind, readout, mount, campaign, nominalF0Hz, nominalQ, radiusM, note } = sensor;
  return (
    <>
      <PageTitle
        crumbs={[{ label: "Sensors", href: "/sensors" }, { label: serial }]}
        meta={`Vibrating ${kind}, read as ${readout}${radiusM ? `, radius ${formatNumber(radiusM * 1e6)} µm` : ""}${sensor.retiredAt ? ", retired" : ""}`}
        actions={
          <>
            {may(role, "record mounts") && <Button look="primary" notPossible={sensor.retiredAt ? "it is retired" : null} onClick={() => setOpen("mount")}>Mount</Button>}
            {may(role, "record mounts") && mount && <Button onClick={() => setOpen("end")}>Take out</Button>}
            {may(role, "edit sensors") && <LinkButton href={`/sensors/${sensorId}/edit`}>Edit</LinkButton>}
          </>
        }
      >
        {serial}
      </PageTitle>
      <PageRow>
        {error && <Problem error={error} onRetry={() => void refetch()} />}
        <Vitals
          items={[
            { label: "Mounted", value: mount ? <Link href={`/rigs/${mount.rigId}`}>{mount.rigName}</Link> : "nowhere", note: mount ? `position ${mount.position}, since ${formatDayTime(mount.since, zone, now)}` : undefined },
            { label: "In campaign", value: campaign ? <Link href={`/campaigns/${campaignCode(campaign.id)}`}>{campaign.name}</Link> : NO_VALUE, note: `${sensor.campaigns} so far` },
            { label: <>Nominal <F0 /></>, value: `${formatNumber(nominalF0Hz)}\u00a0Hz` },
            { label: <>Nominal <Q /></>, value: formatNumber(nominalQ) },
          ]}
        />
        {note && <p className="caption">{note}</p>}
      </PageRow>
      <Section head="Campaigns" note="All to one time scale, each from its own start. Under each run the air reference against its limit.">
        {sensor.campaigns > 0 ? <CampaignsOfSensor sensorId={sensorId} /> : <p className="text-ink2">No campaign has been made with {serial} yet.</p>}
      </Section>
      <Section head="Mounts" note="Each clamping begins a new baseline. The bars are to one time scale, from the first mount to now.">
        <DataTable
          label="Mounts"
          columns={columns}
          rows={mounts.data?.items}
          rowKey={({ id }) => id}
          error={mounts.error}
          onRetry={() => void mounts.refetch()}
          empty={<p className="text-ink2">{serial} has not been mounted yet.</p>}
        />
      </Section>
      {open === "mount" && <MountDialog sensor={sensor} onClose={() => setOpen(null)} />}
      {open === "end" && mount && <EndMountDialog sensor={sensor} mountId={mount.id} onClose={() => setOpen(null)} />}
    </>
  );
}

const columnsIn = ({ zone, first, now }: { zone: string; first: string; now: string }): TableColumn<MountAnswer>[] => [
  { id: "rig", head: "Rig", slot: "a", cell: ({ rigId, rigName, position }) => <><Link href={`/rigs/${rigId}`}>{rigName}</Link>, position {position}</> },
  { id: "from", head: "From", slot: "c", width: 170, cell: ({ from }) => <span className="num">{formatDayTime(from, zone, now)}</span> },
  { id: "to", head: "To", slot: "d", width: 170, cell: ({ to }) => <span className="num">{to ? formatDayTime(to, zone, now) : "now"}</span> },
  { id: "span", head: "Mounted", slot: "w", width: 280, cell: ({ from, to, rigName }) => <MountSpan span={{ from, to }} from={first} now={now} label={`On ${rigName} from ${formatDayTime(from, zone, now)} to ${to ? formatDayTime(to, zone, now) : "now"}`} /> },
  { id: "by", head: "Mounted by", slot: "b", cell: ({ mountedBy }) => mountedBy ?? NO_VALUE },
  { id: "ended", head: "Taken out by", slot: "x", cell: ({ endedBy }) => endedBy ?? NO_VALUE },
  { id: "note", head: "Note", slot: "x", cell: ({ note }) => note ?? "" },
];
