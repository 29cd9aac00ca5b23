import Link from "next/link";
import { Vessel } from "@/components/vessel";
import { formatVolume } from "@/lib/format";
import type { RigAnswer } from "@/lib/rigs/schema";

/** The bottles of a rig and its waste, drawn as vessels. */
export function RigBottles({ rig }: { rig: RigAnswer }) {
  const { ports, wasteMl, wasteCapacityMl } = rig;
  return (
    <div>
      <h3 className="mb-2 font-semibold"><Link href={`/rigs/${rig.id}#bottles`}>{rig.name}</Link></h3>
      <ul className="flex flex-wrap gap-x-1.5 gap-y-4">
        {ports.map(({ number, bottle, remainingMl }) => (
          <li key={number} className="w-[60px] text-[11.5px] leading-[15px] text-ink2">
            {bottle ? (
              <>
                <Vessel liquid={bottle} ml={remainingMl} fullMl={bottle.fullMl} label={`Port ${number}, ${bottle.liquidName}`} />
                <b className="mt-1 block truncate text-ink" title={bottle.liquidName}>{bottle.liquidName}</b>
                <span className="num block">{formatVolume(remainingMl)}</span>
              </>
            ) : (
              <>
                <span className="block h-16 w-[34px] border-b border-dashed border-rule3" />
                <b className="mt-1 block text-ink">Port {number}</b>
                <span>nothing</span>
              </>
            )}
          </li>
        ))}
        <li className="w-[60px] text-[11.5px] leading-[15px] text-ink2">
          <Vessel ml={wasteMl} fullMl={wasteCapacityMl ?? Math.max(wasteMl, 1)} label="Waste" />
          <b className="mt-1 block text-ink">Waste</b>
          <span className="num block">{formatVolume(wasteMl)}</span>
        </li>
      </ul>
    </div>
  );
}
