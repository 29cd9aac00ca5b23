import { NumberField, Option, OptionGroup, TextField } from "@/components/ui/field";
import type { Choices } from "@/lib/campaigns/draft-schema";
import type { Draft } from "./use-draft";

type StartChoiceProps = { draft: Draft; rig: Choices["rigs"][number] | undefined; onChange: (changes: Partial<Draft>) => void };

/** When it may begin at the earliest, and its place in line. */
export function StartChoice({ draft, rig, onChange }: StartChoiceProps) {
  const name = rig?.name ?? "the rig";
  return (
    <>
      <OptionGroup legend="It begins">
        <Option type="radio" name="start" checked={draft.notBefore === ""} onChange={() => onChange({ notBefore: "" })}>As soon as {name} is free</Option>
        <Option type="radio" name="start" checked={draft.notBefore !== ""} onChange={() => onChange({ notBefore: tomorrowMorning() })} note={rig?.timeZone}>Not before a time</Option>
      </OptionGroup>
      {draft.notBefore !== "" && (
        <TextField className="mt-3 max-w-[16em]" type="datetime-local" label="Not before" hint="In the rig's time" value={draft.notBefore} onChange={(event) => onChange({ notBefore: event.target.value })} />
      )}
      <NumberField
        className="mt-3 max-w-[16em]"
        label="Priority"
        hint="−100 to 100; higher goes first in line, and never in front of what runs"
        value={draft.priority}
        onChange={(event) => onChange({ priority: event.target.value })}
      />
    </>
  );
}

function tomorrowMorning(): string {
  const day = new Date(Date.now() + 86_400_000);
  const two = (n: number) => String(n).padStart(2, "0");
  return `${day.getFullYear()}-${two(day.getMonth() + 1)}-${two(day.getDate())}T08:00`;
}
