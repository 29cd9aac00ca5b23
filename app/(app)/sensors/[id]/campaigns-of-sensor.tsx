"use client";

import { useState } from "react";
import { CampaignsTable } from "../../campaigns/campaigns-table";

const SHORTEST_SPAN_MS = 86_400_000;

/** Every campaign with the sensor, its run from its own start, all to one time scale. */
export function CampaignsOfSensor({ sensorId }: { sensorId: string }) {
  const [sort, setSort] = useState("-start");
  const [longestMs, setLongestMs] = useState(0);
  return (
    <CampaignsTable
      label="Campaigns"
      end="End"
      ask={{ sensorId, sort, limit: 50 }}
      sort={sort}
      onSort={setSort}
      spanMs={Math.max(SHORTEST_SPAN_MS, longestMs)}
      onSpan={setLongestMs}
    />
  );
}
