import { ChoiceSentence, ChoiceWord } from "@/components/ui/choice-sentence";
import { TextField } from "@/components/ui/field";
import type { Choices } from "@/lib/campaigns/draft-schema";
import type { Draft } from "./use-draft";

type WhatAndWhereProps = { draft: Draft; choices: Choices; onChange: (changes: Partial<Draft>) => void };

/** Run <protocol, version> with sensor <serial> on <rig>. */
export function WhatAndWhere({ draft, choices: { versions, sensors, rigs }, onChange }: WhatAndWhereProps) {
  const rigName = (id: string | null) => rigs.find((rig) => rig.id === id)?.name;
  const version = versions.find(({ id }) => id === draft.protocolVersionId);
  const sensor = sensors.find(({ id }) => id === draft.sensorId);
  return (
    <>
      <ChoiceSentence>
        Run{" "}
        <ChoiceWord
          label="Protocol version"
          value={draft.protocolVersionId}
          options={orChoose("a protocol", versions.map(({ id, name, version: number }) => ({ value: id, label: `${name}, version ${number}` })))}
          onChoose={(protocolVersionId) => onChange({ protocolVersionId })}
        />{" "}
        with sensor{" "}
        <ChoiceWord
          label="Sensor"
          value={draft.sensorId}
          options={orChoose("a sensor", sensors.map(({ id, serial, kind, rigId }) => ({ value: id, label: `${serial}, ${kind}`, note: rigName(rigId) })))}
          onChoose={(sensorId) => onChange({ sensorId })}
        />{" "}
        on{" "}
        <ChoiceWord
          label="Rig"
          value={draft.rigId}
          options={orChoose("a rig", rigs.map(({ id, name, ports }) => ({ value: id, label: name, note: `${ports.length} ports` })))}
          onChoose={(rigId) => onChange({ rigId })}
        />
        .
      </ChoiceSentence>
      <p className="caption">
        {version && `Version ${version.version}${version.savedBy ? ` was saved by ${version.savedBy}` : ""} and uses ${version.slots.length === 0 ? "no liquid" : version.slots.join(", ")}. `}
        {sensor && draft.rigId && (sensor.rigId === draft.rigId ? `${sensor.serial} is mounted there.` : `${sensor.serial} is not mounted there: the campaign begins with a mount task.`)}
      </p>
      <TextField className="mt-3 max-w-[30em]" label="Name" hint="Made of protocol, sensor and rig unless given" maxLength={200} value={draft.name} onChange={(event) => onChange({ name: event.target.value })} />
    </>
  );
}

const orChoose = (what: string, options: { value: string; label: string; note?: string }[]) => (options.length > 0 ? [{ value: "", label: what }, ...options] : [{ value: "", label: `${what} (there is none yet)` }]);
