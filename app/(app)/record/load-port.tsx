"use client";

import { useQuery } from "@tanstack/react-query";
import { rigOptions } from "@/lib/rigs/client";
import type { Unsent } from "../outbox/unsent";
import { LoadDialog } from "../rigs/[id]/load-dialog";

type LoadPortProps = { rigId: string; port: number; onClose: () => void; onKeep?: (unsent: Unsent) => void };

/** Records a bottle on a port of a rig that only its id is known of; a task that asks for it is answered by that. */
export function LoadPort({ rigId, port, onClose, onKeep }: LoadPortProps) {
  const { data: rig } = useQuery(rigOptions(rigId));
  const found = rig?.ports.find(({ number }) => number === port);
  return rig && found ? <LoadDialog rig={rig} port={found} onClose={onClose} onKeep={onKeep} /> : null;
}
