"use client";

import { useQuery } from "@tanstack/react-query";
import { sensorOptions } from "@/lib/sensors/client";
import type { Unsent } from "../outbox/unsent";
import { MountDialog } from "../sensors/[id]/mount-dialog";

type MountSensorProps = { sensorId: string; rigId: string; onClose: () => void; onKeep?: (unsent: Unsent) => void };

/** Records a mount of a sensor that only its id is known of; a task that asks for it is answered by that. */
export function MountSensor({ sensorId, rigId, onClose, onKeep }: MountSensorProps) {
  const { data: sensor } = useQuery(sensorOptions(sensorId));
  return sensor ? <MountDialog sensor={sensor} rigId={rigId} onClose={onClose} onKeep={onKeep} /> : null;
}
