import Link from "next/link";
import type { TableColumn } from "@/components/ui/data-table";
import { formatVolume, NO_VALUE, plural } from "@/lib/format";
import { formatDuration, formatPlusMinus, formatRecent } from "@/lib/format-time";
import type { ProtocolItem } from "@/lib/protocols/schema";

export const columnsIn = (zone: string, now: string): TableColumn<ProtocolItem>[] => [
  {
    id: "name",
    head: "Protocol",
    slot: "a",
    sortable: true,
    cell: ({ id, name, hasDraft, version }) => (
      <>
        <Link href={`/protocols/${id}`} className="font-semibold">{name}</Link>
        {hasDraft && <span className="text-ink2"> {version === null ? "draft" : `with a draft of version ${version + 1}`}</span>}
      </>
    ),
  },
  { id: "versions", head: "Versions", slot: "x", align: "right", sortable: true, cell: ({ versions }) => (versions === 0 ? "none yet" : versions) },
  { id: "campaigns", head: "Campaigns", slot: "d", align: "right", sortable: true, cell: ({ campaigns }) => <>{campaigns}<span className="hidden phone:inline"> {plural(campaigns, "campaign")}</span></> },
  {
    id: "takes",
    head: "Takes",
    slot: "b",
    align: "right",
    cell: ({ estimate }) => {
      if (!estimate) return NO_VALUE;
      const { low, likely, high } = estimate.seconds;
      return <>{formatDuration(likely)} <span className="text-ink2">{formatPlusMinus((high - low) / 2)}</span></>;
    },
  },
  { id: "waste", head: "Waste", slot: "x", align: "right", cell: ({ estimate }) => (estimate ? formatVolume(estimate.wasteMl) : NO_VALUE) },
  {
    id: "changed",
    head: "Last changed",
    slot: "c",
    sortable: true,
    cell: ({ changedAt, changedBy }) => <><span className="num">{formatRecent(changedAt, zone, now)}</span>{changedBy && `, ${changedBy}`}</>,
  },
];
