"use client";

import { useMemo } from "react";
import { RunStrip } from "@/components/strip/run-strip";
import type { StripInput } from "@/components/strip/strip-input";
import type { Tint } from "@/components/strip/tint";
import { formatDuration } from "@/lib/format-time";
import type { EstimateAnswer } from "@/lib/protocols/schema";
import { toStripInput } from "../to-strip-input";

const TINTS: readonly Tint[] = [1, 2, 3];

/** The run as it would go, in outline, before any liquid is chosen: a slot has the first letter of its name. */
export function PlannedStrip({ strip, zone }: { strip: EstimateAnswer["strip"]; zone: string }) {
  const input = useMemo(() => inputOf(strip), [strip]);
  if (input.segments.length === 0) return null;
  return (
    <div className="my-2">
      <RunStrip {...input} size="row" zone={zone} label="The run as planned" />
      {!strip.isWhole && <p className="caption">The first {formatDuration((Date.parse(strip.to) - Date.parse(strip.from)) / 1000)} of it.</p>}
    </div>
  );
}

function inputOf({ from, to, segments }: EstimateAnswer["strip"]): StripInput {
  const slots = [...new Set(segments.flatMap(({ medium }) => medium ?? []))];
  const liquids = slots.map((slot, i) => ({ slot, name: slot, letter: slot.charAt(0).toUpperCase(), tint: TINTS[i % TINTS.length] }));
  return toStripInput({ from, to, segments, liquids, trace: [] });
}
