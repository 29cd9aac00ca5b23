import type { StabilityAnswer } from "@/lib/analysis/schema";
import { asSentence, capitalised, formatCount, formatNumber, formatShare, listOf } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";
import type { NamedAnswers } from "./noise-table";

type Dead = NonNullable<StabilityAnswer["deadTime"]>;

/** For each curve: readings used and left out by reason, pauses between repeats, and the compensation. */
export function WhatWasUsed({ curves }: { curves: readonly NamedAnswers[] }) {
  return (
    <dl className="flags">
      {curves.map(({ id, name, within, across }) => (
        <div key={id}>
          <dt><b>{name}</b></dt>
          <dd>
            {within && <p>Within phases: {within.used}. {readingsWords(within.readings)} {within.deadTime && deadTimeWords(within.deadTime)}</p>}
            {across && <p>{asSentence(`from phase to phase: ${across.used}.`)}</p>}
          </dd>
        </div>
      ))}
    </dl>
  );
}

/** `Left out: 12 edge, 3 by a person. Used although flagged: 40 noisy.` */
export function readingsWords(readings: StabilityAnswer["readings"]): string {
  if (!readings) return "";
  const words: Record<string, string> = { excluded: "by a person", discarded: "discarded by the protocol", "no value": "without a value" };
  const list = (counts: Record<string, number>) => listOf(Object.entries(counts).map(([name, count]) => `${formatCount(count)} ${words[name] ?? name}`));
  const out = Object.keys(readings.reasons).length > 0 ? `Left out: ${list(readings.reasons)}.` : "Nothing was left out.";
  return Object.keys(readings.flaggedButUsed).length > 0 ? `${out} Used although flagged: ${list(readings.flaggedButUsed)}.` : out;
}

/** What pauses between repeats do, in a sentence. */
export function deadTimeWords({ repeatS, deadShare, largestEffect, treatment }: Dead): string {
  if (treatment === "none") return "There are no pauses between repeats.";
  const pauses = `A repeat takes ${formatDuration(repeatS)}; ${formatShare(deadShare, deadShare < 0.1 ? 1 : 0)} of the time nothing is measured`;
  const effect = largestEffect === null ? "" : largestEffect < 0.0005 ? "less than 0.1\u00a0%" : `up to ${formatNumber(Number((largestEffect * 100).toPrecision(2)))}\u00a0%`;
  if (treatment === "negligible") return `${pauses}, which is negligible.`;
  if (treatment === "not available") return `${pauses}. For this statistic there are no bias functions: the points stand as they are.`;
  if (treatment === "corrected") return `${pauses}; points are freed of it by the bias functions B₂ and B₃, which changed them by ${effect}.`;
  return `${pauses}; it changes points by ${effect}, which is stated and not corrected for. ${capitalised("averaging times are those of the clock.")}`;
}
