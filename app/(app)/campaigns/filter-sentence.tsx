"use client";

import { AddressWord, ChoiceSentence } from "@/components/ui/choice-sentence";
import { TextField } from "@/components/ui/field";
import type { OverviewAnswer } from "@/lib/campaigns/overview-schema";
import type { ListFilter } from "./list-filter";

type FilterSentenceProps = { overview: OverviewAnswer; filter: ListFilter; onSearch: (search: string | null) => void };

/** `Show every state on every rig, with any sensor.` The address says the same. */
export function FilterSentence({ overview: { places, rigs, sensors }, filter: { search }, onSearch }: FilterSentenceProps) {
  const note = (n: number) => String(n);
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-2">
      <ChoiceSentence>
        Show{" "}
        <AddressWord
          name="state"
          label="State"
          options={[
            { value: "", label: "every state" },
            { value: "on-rigs", label: "what is on the rigs", note: note(places["on-rigs"]) },
            { value: "in-line", label: "what is in line", note: note(places["in-line"]) },
            { value: "done", label: "what is done", note: note(places.done) },
            { value: "draft", label: "drafts", note: note(places.draft) },
          ]}
        />{" "}
        on <AddressWord name="rig" label="Rig" options={[{ value: "", label: "every rig" }, ...rigs.map(({ id, name }) => ({ value: id, label: name }))]} />, with{" "}
        <AddressWord name="sensor" label="Sensor" options={[{ value: "", label: "any sensor" }, ...sensors.map(({ id, serial }) => ({ value: id, label: serial }))]} />.
      </ChoiceSentence>
      <form
        key={search}
        role="search"
        className="w-[220px]"
        onSubmit={(event) => {
          event.preventDefault();
          onSearch(String(new FormData(event.currentTarget).get("search") ?? "").trim() || null);
        }}
      >
        <TextField type="search" name="search" label={<span className="visually-hidden">Find in names</span>} placeholder="Find in names" defaultValue={search} maxLength={200} />
      </form>
    </div>
  );
}
