"use client";

import { at } from "@/lib/protocol/sentence";
import { useFields } from "./editor-context";
import { SweepPreview } from "./sweep-preview";
import { NumberInput, SelectInput } from "./typed-fields";

/** Where one repeat sweeps, how wide, how finely, how slowly and how hard. */
export function SweepFields() {
  const { values, set } = useFields();
  const isTracked = at(values, "sweep.centre") === "track";
  const isInHz = unitOf(values, "sweep.span", "hz");
  const isInSeconds = unitOf(values, "sweep.dwell", "s");
  const halfWidths = at(values, "sweep.span.halfWidths");
  const points = at(values, "sweep.points");
  return (
    <fieldset className="field-set">
      <legend>Sweep</legend>
      <SelectInput
        path="sweep.centre"
        label="Centre"
        chosen={isTracked ? "track" : "fixed"}
        options={[{ value: "track", label: "last good fit" }, { value: "fixed", label: "a frequency" }]}
        write={(how) => set("sweep.centre", how === "track" ? "track" : 2000)}
      />
      {!isTracked && <NumberInput path="sweep.centre" label="Frequency" hint="Hz" />}
      <SelectInput
        path="sweep.span"
        label="Span in"
        chosen={isInHz ? "hz" : "halfWidths"}
        options={[{ value: "halfWidths", label: "half-widths" }, { value: "hz", label: "Hz" }]}
        write={(unit) => set("sweep.span", unit === "hz" ? { hz: 20 } : { halfWidths: 8 })}
      />
      <NumberInput key={`span ${isInHz}`} path={isInHz ? "sweep.span.hz" : "sweep.span.halfWidths"} label="Span" hint={isInHz ? "Hz in all" : "half-widths in all"} />
      <NumberInput path="sweep.points" label="Points" hint="11 to 4001" />
      <SelectInput
        path="sweep.dwell"
        label="Dwell in"
        chosen={isInSeconds ? "s" : "ringDowns"}
        options={[{ value: "ringDowns", label: "ring-downs" }, { value: "s", label: "seconds" }]}
        write={(unit) => set("sweep.dwell", unit === "s" ? { s: 0.5 } : { ringDowns: 5 })}
      />
      <NumberInput key={`dwell ${isInSeconds}`} path={isInSeconds ? "sweep.dwell.s" : "sweep.dwell.ringDowns"} label="Dwell" hint={isInSeconds ? "s a point" : "ring-downs a point"} />
      <NumberInput path="sweep.driveV" label="Drive" hint="V" />
      {isTracked && isPositive(halfWidths) && isPositive(points) && <SweepPreview halfWidths={halfWidths} points={Math.min(4001, Math.max(11, Math.round(points)))} />}
    </fieldset>
  );
}

const isPositive = (value: unknown): value is number => typeof value === "number" && value > 0 && Number.isFinite(value);

/** The unit stays chosen while its field is empty: an object without its number still says so by not having the other. */
function unitOf(values: unknown, path: string, unit: "hz" | "s"): boolean {
  const given = at(values, path);
  return typeof given === "object" && given !== null && unit in given;
}
