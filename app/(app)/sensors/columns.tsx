import Link from "next/link";
import type { TableColumn } from "@/components/ui/data-table";
import { F0, Q } from "@/components/ui/quantity";
import { campaignCode } from "@/lib/campaigns/code";
import { formatNumber, NO_VALUE } from "@/lib/format";
import { formatDay } from "@/lib/format-time";
import type { SensorAnswer } from "@/lib/sensors/schema";

export const columnsIn = (zone: string): TableColumn<SensorAnswer>[] => [
  { id: "serial", head: "Sensor", slot: "a", cell: ({ id, serial }) => <Link href={`/sensors/${id}`} className="font-semibold">{serial}</Link> },
  { id: "kind", head: "Kind", slot: "b", cell: ({ kind, readout }) => `${kind}, ${readout}` },
  {
    id: "mount",
    head: "Mounted",
    slot: "c",
    cell: ({ mount }) => (mount ? <><Link href={`/rigs/${mount.rigId}`}>{mount.rigName}</Link>, since {formatDay(mount.since, zone)}</> : NO_VALUE),
  },
  { id: "campaign", head: "In campaign", slot: "x", cell: ({ campaign }) => (campaign ? <Link href={`/campaigns/${campaignCode(campaign.id)}`}>{campaign.name}</Link> : NO_VALUE) },
  { id: "f0", head: <>Nominal <F0 /> / Hz</>, slot: "d", align: "right", cell: ({ nominalF0Hz }) => formatNumber(nominalF0Hz) },
  { id: "q", head: <>Nominal <Q /></>, slot: "x", align: "right", cell: ({ nominalQ }) => formatNumber(nominalQ) },
  { id: "campaigns", head: "Campaigns", slot: "x", align: "right", cell: ({ campaigns }) => campaigns },
];
