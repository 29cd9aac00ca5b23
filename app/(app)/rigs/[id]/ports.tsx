"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { useState } from "react";
import { Vessel } from "@/components/vessel";
import { Button } from "@/components/ui/button";
import { fetchJson } from "@/lib/http/fetch-json";
import { formatVolume } from "@/lib/format";
import { formatDay } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { wasteAnswer, type PortAnswer, type RigAnswer } from "@/lib/rigs/schema";
import { LoadDialog } from "./load-dialog";

export function Ports({ rig, role, asOf }: { rig: RigAnswer; role: Role; asOf: number }) {
  const [loading, setLoading] = useState<PortAnswer | null>(null);
  const mayLoad = may(role, "record loads");
  return (
    <>
      <ul className="grid gap-x-8 gap-y-5 grid-cols-[repeat(auto-fill,minmax(210px,1fr))]">
        {rig.ports.map((port) => (
          <li key={port.number} className="flex gap-3">
            {port.bottle ? (
              <Vessel liquid={port.bottle} ml={port.remainingMl} fullMl={port.bottle.fullMl} label={`Port ${port.number}, ${port.bottle.liquidName}`} />
            ) : (
              <span className="block h-16 w-12 flex-none border-b border-dashed border-rule3" aria-hidden="true" />
            )}
            <div className="min-w-0">
              <b>Port {port.number}</b>
              <Standing port={port} timeZone={rig.timeZone} asOf={asOf} />
              {mayLoad && <div className="buttons mt-2"><Button small onClick={() => setLoading(port)}>Load</Button></div>}
            </div>
          </li>
        ))}
        <Waste rig={rig} mayEmpty={mayLoad} />
      </ul>
      {loading && <LoadDialog rig={rig} port={loading} onClose={() => setLoading(null)} />}
    </>
  );
}

function Standing({ port: { bottle, remainingMl }, timeZone, asOf }: { port: PortAnswer; timeZone: string; asOf: number }) {
  if (!bottle) return <p className="small text-ink2">Nothing stands here.</p>;
  return (
    <p className="small text-ink2">
      <Link href={`/liquids/${bottle.liquidId}`}>{bottle.liquidName}</Link>, lot {bottle.lotCode}
      <br />
      <span className="num">{formatVolume(remainingMl)}</span>, since {formatDay(bottle.loadedAt, timeZone, asOf)}
      {bottle.expiresAt && <><br />expires {formatDay(bottle.expiresAt, timeZone, asOf)}</>}
    </p>
  );
}

function Waste({ rig, mayEmpty }: { rig: RigAnswer; mayEmpty: boolean }) {
  const queries = useQueryClient();
  const { wasteMl, wasteCapacityMl } = rig;
  const empty = useMutation({
    mutationFn: () => fetchJson(`/api/rigs/${rig.id}/waste-emptied`, { method: "POST", body: {}, answer: wasteAnswer }),
    onSuccess: () => queries.invalidateQueries({ queryKey: ["rigs"] }),
  });
  return (
    <li className="flex gap-3">
      <Vessel ml={wasteMl} fullMl={wasteCapacityMl ?? Math.max(wasteMl, 1)} label="Waste" />
      <div className="min-w-0">
        <b>Waste</b>
        <p className="small text-ink2">
          <span className="num">{formatVolume(wasteMl)}</span>
          {wasteCapacityMl === null ? ", container not measured" : ` of ${formatVolume(wasteCapacityMl)}`}
        </p>
        {mayEmpty && <div className="buttons mt-2"><Button small busy={empty.isPending} onClick={() => empty.mutate()}>Emptied</Button></div>}
        {empty.error && <p role="alert" className="small">{empty.error.message}</p>}
      </div>
    </li>
  );
}
