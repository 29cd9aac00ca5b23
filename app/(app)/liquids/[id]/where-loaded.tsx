"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { Vessel } from "@/components/vessel";
import { formatVolume } from "@/lib/format";
import type { LiquidAnswer, LotAnswer } from "@/lib/liquids/schema";
import { timelineOptions } from "@/lib/rigs/client";
import { neededOf } from "../../rigs/rig-bottles";

/** Bottles of the liquid on rigs, with a notch at what campaigns there still need. */
export function WhereLoaded({ liquid, lots }: { liquid: LiquidAnswer; lots: readonly LotAnswer[] }) {
  const bottles = lots.flatMap(({ code, ports }) => ports.map((port) => ({ code, ...port })));
  const { data: timeline } = useQuery({ ...timelineOptions(), enabled: bottles.length > 0 });
  if (bottles.length === 0) return <p className="text-ink2">It stands on no rig.</p>;
  return (
    <ul className="flex flex-wrap gap-x-8 gap-y-5">
      {bottles.map(({ code, rigId, rigName, port, remainingMl, fullMl }) => {
        const neededMl = neededOf(timeline?.items.find((lane) => lane.rigId === rigId)?.needs, port);
        return (
          <li key={`${rigId}-${port}`} className="flex gap-3">
            <Vessel liquid={liquid} ml={remainingMl} fullMl={Math.max(fullMl, neededMl)} stillMl={neededMl > 0 ? neededMl : undefined} label={`${rigName}, port ${port}`} />
            <div>
              <b><Link href={`/rigs/${rigId}#bottles`}>{rigName}, port {port}</Link></b>
              <p className="small text-ink2">
                lot {code}
                <br />
                <span className="num">{formatVolume(remainingMl)}{neededMl > 0 && <>, {neededMl > remainingMl ? <b className="text-ink">needs {formatVolume(neededMl)}</b> : `needs ${formatVolume(neededMl)}`}</>}</span>
              </p>
            </div>
          </li>
        );
      })}
    </ul>
  );
}
