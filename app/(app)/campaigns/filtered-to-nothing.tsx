import { Button } from "@/components/ui/button";
import type { OverviewAnswer } from "@/lib/campaigns/overview-schema";
import { formatCount } from "@/lib/format";
import type { FilterWord, ListFilter } from "./list-filter";

const STATES = { "on-rigs": "on the rigs", "in-line": "in line", done: "done", draft: "a draft" } as const;

type FilteredToNothingProps = { overview: OverviewAnswer; filter: ListFilter; onLoosen: (word: FilterWord) => void; onAll: () => void };

/** The filter shows nothing: says so with the count, and what each word less would show. */
export function FilteredToNothing({ overview: { total, without, rigs, sensors }, filter: { state, rigId, sensorId, search }, onLoosen, onAll }: FilteredToNothingProps) {
  const rig = rigs.find(({ id }) => id === rigId)?.name;
  const sensor = sensors.find(({ id }) => id === sensorId)?.serial;
  const says = [state && `is ${STATES[state]}`, rigId && `${state ? "" : "is "}on ${rig ?? "this rig"}`, sensorId && `${state || rigId ? "" : "is "}with ${sensor ?? "this sensor"}`, search && `${state || rigId || sensorId ? "and has" : "has"} “${search}” in its names`];
  const words = [
    { word: "sensor" as const, set: sensorId, label: "Any sensor", n: without.sensorId, name: "sensor" },
    { word: "rig" as const, set: rigId, label: "Every rig", n: without.rigId, name: "rig" },
    { word: "state" as const, set: state, label: "Every state", n: without.state, name: "state" },
    { word: "search" as const, set: search, label: "Any name", n: without.search, name: "words" },
  ].filter(({ set, n }) => set && n > 0);
  return (
    <div className="max-w-[44em]" role="status">
      <p className="say-small">None of {formatCount(total)} campaigns {says.filter(Boolean).join(" ")}.</p>
      {words.length > 0 && <p className="small mt-1 text-ink2">{words.map(({ name, n }, i) => `${i === 0 ? "Without" : "without"} the ${name} it would be ${formatCount(n)}`).join(", ")}.</p>}
      <div className="buttons mt-3">
        {words.map(({ word, label }) => <Button key={word} small onClick={() => onLoosen(word)}>{label}</Button>)}
        <Button small look="link" onClick={onAll}>Show all {formatCount(total)}</Button>
      </div>
    </div>
  );
}
