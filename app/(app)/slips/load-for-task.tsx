"use client";

import { useQuery } from "@tanstack/react-query";
import { rigOptions } from "@/lib/rigs/client";
import type { Unsent } from "../outbox/unsent";
import { LoadDialog } from "../rigs/[id]/load-dialog";

type LoadForTaskProps = { rigId: string; port: number; onClose: () => void; onKeep: (unsent: Unsent) => void };

/** Recording the bottle answers the task. */
export function LoadForTask({ rigId, port, onClose, onKeep }: LoadForTaskProps) {
  const { data: rig } = useQuery(rigOptions(rigId));
  const found = rig?.ports.find(({ number }) => number === port);
  return rig && found ? <LoadDialog rig={rig} port={found} onClose={onClose} onKeep={onKeep} /> : null;
}
