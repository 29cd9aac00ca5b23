"use client";

import { NoNetwork } from "@/components/ui/states";
import { useOfflineSince } from "@/components/ui/use-offline-since";
import { formatTime } from "@/lib/format-time";

/** On top of every page while the device has no network; `kept`: this person can give answers, which wait. */
export function OfflineLine({ zone, kept }: { zone: string; kept: boolean }) {
  const since = useOfflineSince();
  if (!since) return null;
  return (
    <div className="page-row">
      <div className="margin" />
      <NoNetwork since={formatTime(since, zone)} kept={kept} />
    </div>
  );
}
