import Link from "next/link";
import { Vessel } from "@/components/vessel";
import { capitalised, formatVolume, listOf, plural } from "@/lib/format";
import type { RigAnswer } from "@/lib/rigs/schema";
import type { LaneAnswer } from "@/lib/rigs/timeline-schema";

const ITEM = "w-[78px] text-[11.5px] leading-[15px] text-ink2";

/** The bottles of a rig and its waste, drawn as vessels, with a notch at what the campaign on it and those in line still need. */
export function RigBottles({ rig, needs }: { rig: RigAnswer; needs: LaneAnswer["needs"] | undefined }) {
  const { ports, wasteMl, wasteCapacityMl } = rig;
  const empty = ports.filter(({ bottle }) => bottle === null);
  const addsMl = needs && needs.wasteMl + needs.inLineWasteMl;
  return (
    <div>
      <h3 className="mb-2 font-semibold"><Link href={`/rigs/${rig.id}#bottles`} className="no-underline hover:underline">{rig.name}</Link></h3>
      <ul className="flex flex-wrap gap-x-1.5 gap-y-4">
        {ports.map(({ number, bottle, remainingMl }) => {
          const neededMl = neededOf(needs, number);
          if (!bottle) return null;
          return (
            <li key={number} className={ITEM}>
              <Vessel liquid={bottle} ml={remainingMl} fullMl={Math.max(bottle.fullMl, neededMl)} stillMl={neededMl > 0 ? neededMl : undefined} label={`Port ${number}, ${bottle.liquidName}`} />
              <b className="mt-1 block truncate text-ink" title={bottle.liquidName}>{bottle.liquidName}</b>
              <span className="num block">{formatVolume(remainingMl)}</span>
              {neededMl > 0 && <Amount word="needs" ml={neededMl} strong={neededMl > remainingMl} />}
            </li>
          );
        })}
        <li className={ITEM}>
          <Vessel ml={wasteMl} fullMl={wasteCapacityMl ?? Math.max(wasteMl + (addsMl ?? 0), 1)} stillMl={addsMl} label="Waste" />
          <b className="mt-1 block text-ink">Waste</b>
          <span className="num block">{formatVolume(wasteMl)}</span>
          {addsMl !== undefined && addsMl > 0 && <Amount word="adds" ml={addsMl} strong={wasteCapacityMl !== null && wasteMl + addsMl > wasteCapacityMl} />}
        </li>
      </ul>
      {empty.length > 0 && <p className="small mt-2 text-ink2">{capitalised(plural(empty.length, "port"))} {listOf(empty.map(({ number }) => String(number)))}: nothing</p>}
      {empty.map(({ number }) => neededOf(needs, number) > 0 && <p key={number} className="small"><b>Port {number} needs {formatVolume(neededOf(needs, number))}</b></p>)}
    </div>
  );
}

function Amount({ word, ml, strong }: { word: string; ml: number; strong: boolean }) {
  const text = `${word} ${formatVolume(ml)}`;
  return strong ? <b className="num block text-ink">{text}</b> : <span className="num block">{text}</span>;
}

/** mL that the campaign on the rig and those in line still take of a port. */
export function neededOf(needs: LaneAnswer["needs"] | undefined, number: number): number {
  const port = needs?.ports.find((one) => one.port === number);
  return port ? port.ml + port.inLineMl : 0;
}
