"use client";

import { useRouter } from "next/navigation";
import { useMemo } from "react";
import { XyChart, type XySeries } from "@/components/charts/xy-chart";
import { Section } from "@/components/ui/page";
import { formatCount, formatNumber, formatUncertain, plural } from "@/lib/format";
import type { SweepAnswer, SweepPlace } from "@/lib/readings/schema";
import { readingHref } from "./walk-buttons";

type InItsPhaseProps = { sweep: SweepAnswer; place: SweepPlace; code: string };

/** All repeats of the phase about its value, with this one ringed; a press on another opens it. */
export function InItsPhase({ sweep, place, code }: InItsPhaseProps) {
  const router = useRouter();
  const { values, f0, n, repeats, discard } = place;
  const referenceHz = f0?.mean ?? values[0]?.f0Hz;
  const series = useMemo(() => (referenceHz === undefined ? [] : seriesOf(place, sweep.index, referenceHz)), [place, sweep.index, referenceHz]);
  if (referenceHz === undefined) return null;
  const here = values.find(({ index }) => index === sweep.index);
  const less = formatNumber(referenceHz, { decimals: 4 });
  return (
    <Section head="In its phase" note={`${n < repeats ? `All ${formatCount(n)} repeats so far.` : `All ${formatCount(n)} repeats.`} The ring is this one; open another with a press, or with the arrow keys and Enter.`}>
      <XyChart
        label={`f0 of the repeats of cycle ${sweep.cycle}, step ${sweep.sequence}`}
        file={`${code}-phase-${sweep.sequence}`}
        x={{ words: "repeat" }}
        y={{ symbol: "f", sub: "0", less: `${less}\u00a0Hz`, unit: "mHz" }}
        series={series}
        xRange={[0.5, Math.max(repeats, n) + 0.5]}
        height={130}
        sentence={
          <>
            {here && `This repeat is ${formatNumber((here.f0Hz - referenceHz) * 1000, { decimals: 2, signed: true })} mHz from the phase value. `}
            {f0 && `Line and band: phase value ${formatUncertain(f0.mean, f0.u)} Hz, k = 2. `}
            {discard > 0 && `The first ${formatCount(discard)} ${plural(discard, "repeat is", "repeats are")} left out by the protocol. `}
            Grey is left out.
          </>
        }
        onOpen={(point) => router.push(readingHref(code, { sequence: sweep.sequence, index: Math.round(point.x) - 1 }), { scroll: false })}
      />
    </Section>
  );
}

function seriesOf({ values, f0, n, discard }: SweepPlace, index: number, referenceHz: number): XySeries[] {
  const mHz = (hz: number) => (hz - referenceHz) * 1000;
  const band = f0 ? 2 * f0.u * 1000 : 0;
  return [
    { id: "repeats", label: "repeat", pen: "points", points: values.map((value) => ({ x: value.index + 1, y: mHz(value.f0Hz), left: value.leftOut, name: `Repeat ${value.index + 1}` })) },
    ...(f0 ? [{ id: "value", label: "phase value", pen: "ink" as const, line: [discard + 1, n].map((x) => ({ x, y: 0, low: -band, high: band })) }] : []),
    { id: "this", label: "this repeat", pen: "ink", points: values.filter((value) => value.index === index).map((value) => ({ x: value.index + 1, y: mHz(value.f0Hz), hollow: true, name: `Repeat ${value.index + 1}` })) },
  ];
}
