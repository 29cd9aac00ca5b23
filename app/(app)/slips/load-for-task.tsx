"use client";

import { useQuery } from "@tanstack/react-query";
import { rigOptions } from "@/lib/rigs/client";
import { LoadDialog } from "../rigs/[id]/load-dialog";

/** Recording the bottle answers the task. */
export function LoadForTask({ rigId, port, onClose }: { rigId: string; port: number; onClose: () => void }) {
  const { data: rig } = useQuery(rigOptions(rigId));
  const found = rig?.ports.find(({ number }) => number === port);
  return rig && found ? <LoadDialog rig={rig} port={found} onClose={onClose} /> : null;
}
