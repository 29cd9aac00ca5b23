"use client";

import { useQuery } from "@tanstack/react-query";
import { sensorOptions } from "@/lib/sensors/client";
import { MountDialog } from "../sensors/[id]/mount-dialog";

/** Recording the mount answers the task. */
export function MountForTask({ sensorId, rigId, onClose }: { sensorId: string; rigId: string; onClose: () => void }) {
  const { data: sensor } = useQuery(sensorOptions(sensorId));
  return sensor ? <MountDialog sensor={sensor} rigId={rigId} onClose={onClose} /> : null;
}
