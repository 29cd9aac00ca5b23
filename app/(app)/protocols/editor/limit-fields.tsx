"use client";

import type { LimitKind } from "@/lib/protocols/new-block";
import { useFields } from "./editor-context";
import { ChecksInput, DurationInput, NumberInput, SelectInput, TextInput } from "./typed-fields";

const DOES = [
  { value: "note", label: "note it" },
  { value: "mail", label: "mail" },
  { value: "hold", label: "hold" },
  { value: "cleanAgain", label: "clean again" },
  { value: "stop", label: "stop" },
];
const QUANTITIES = [{ value: "f0", label: "f₀" }, { value: "q", label: "Q" }];

/** What a limit watches by its kind, what it does, and how patient it is. */
export function LimitFields({ kind }: { kind: string }) {
  const { values, slots } = useFields();
  const cleansAgain = Array.isArray(values.does) && values.does.includes("cleanAgain");
  return (
    <>
      <OwnFields kind={kind as LimitKind} />
      <div className="whole"><ChecksInput path="does" label="Then" options={DOES} /></div>
      <TextInput path="medium" label="Only in" hint="air or a slot; else everywhere" suggestions={["air", ...slots]} />
      <DurationInput path="deadTimeS" label="Not again within" />
      <NumberInput path="clearAt" label="Back within, of the limit" hint="0 to 1, else 0.8" />
      <NumberInput path="minPhases" label="Phases before it judges" hint="may be left out" />
      <NumberInput path="falseAlarmsPerYear" label="False alarms a year" hint="else 1" />
      {cleansAgain && <NumberInput path="maxTimes" label="Clean again at most" hint="times, else 2; then it holds" />}
    </>
  );
}

function OwnFields({ kind }: { kind: LimitKind }) {
  const { values, set } = useFields();
  const quantity = <SelectInput path="quantity" label="Of" options={QUANTITIES} />;
  switch (kind) {
    case "return":
      return <><NumberInput path="tolerancePpm" label="Off by more than" hint="ppm of f₀; one of the two is needed" /><NumberInput path="toleranceQPercent" label="or in Q by" hint="%" /></>;
    case "drift": {
      const crosses = values.ppmPerDay === undefined;
      return (
        <>
          {quantity}
          <SelectInput
            path="ppmPerDay"
            label="When"
            chosen={crosses ? "crosses" : "slope"}
            options={[{ value: "slope", label: "the slope is too steep" }, { value: "crosses", label: "it will cross a bound" }]}
            write={(how) => {
              set("ppmPerDay", how === "slope" ? 1 : undefined);
              set("crossesPpm", how === "slope" ? undefined : 50);
              set("withinDays", how === "slope" ? undefined : 30);
            }}
          />
          {crosses ? (
            <><NumberInput path="crossesPpm" label="Crosses" hint="ppm" /><NumberInput path="withinDays" label="Within" hint="days" /></>
          ) : (
            <NumberInput path="ppmPerDay" label="More than" hint="ppm a day" />
          )}
        </>
      );
    }
    case "step":
      return <>{quantity}<NumberInput path="sigma" label="A shift of" hint="σ" /></>;
    case "noise":
      return <>{quantity}<NumberInput path="factor" label="Variance grown by" hint="a factor above 1" /></>;
    case "fit":
      return <NumberInput path="sharePercent" label="More than" hint="% of a phase failed or at the edge" />;
    case "temperature":
      return <><NumberInput path="minC" label="From" hint="°C" /><NumberInput path="maxC" label="To" hint="°C" /></>;
    case "silence":
      return <DurationInput path="afterS" label="After" />;
    case "count":
      return <NumberInput path="failedSteps" label="Failed attempts in a row" />;
  }
}
