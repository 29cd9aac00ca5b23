"use client";

import { useQuery } from "@tanstack/react-query";
import { sensorOptions } from "@/lib/sensors/client";
import type { Unsent } from "../outbox/unsent";
import { MountDialog } from "../sensors/[id]/mount-dialog";

type MountForTaskProps = { sensorId: string; rigId: string; onClose: () => void; onKeep: (unsent: Unsent) => void };

/** Recording the mount answers the task. */
export function MountForTask({ sensorId, rigId, onClose, onKeep }: MountForTaskProps) {
  const { data: sensor } = useQuery(sensorOptions(sensorId));
  return sensor ? <MountDialog sensor={sensor} rigId={rigId} onClose={onClose} onKeep={onKeep} /> : null;
}
