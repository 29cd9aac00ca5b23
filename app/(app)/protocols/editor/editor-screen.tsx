"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { SelectField } from "@/components/ui/field";
import { PageTitle, Section } from "@/components/ui/page";
import { Problem } from "@/components/ui/states";
import { useLater } from "@/components/ui/use-later";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { inWords, plural } from "@/lib/format";
import { estimateOptions } from "@/lib/protocols/client";
import { type Draft, LISTS } from "@/lib/protocols/draft";
import { ownerOf } from "@/lib/protocols/draft-errors";
import { EstimatePanel, ProblemsPanel } from "../estimate-panel";
import { AddStep } from "./add-step";
import { EditorContext, type Editor } from "./editor-context";
import { LimitsSection } from "./limits-section";
import { ListSection } from "./list-section";
import { MistakesPanel } from "./mistakes-panel";
import { ProtocolFields } from "./protocol-fields";
import { SaveDialog } from "./save-dialog";
import { SavedNote } from "./saved-note";
import { slotsIn } from "./slots-in";
import { StepRows } from "./step-rows";
import { ThrowAway } from "./throw-away";
import { type Begun, useDraftEditor } from "./use-editor";

type EditorScreenProps = Begun & { zone: string };

/** Writes the next version of a protocol: sentences that open, with the estimate and the rig's check beside them. */
export function EditorScreen({ zone, ...begun }: EditorScreenProps) {
  const { draft, definition, errors, sorted, saver, saved, canUndo, edit, undo, refuse } = useDraftEditor(begun);
  const [open, setOpen] = useState<Editor["open"]>(null);
  const [said, announce] = useState("");
  const [saves, setSaves] = useState(false);
  const [against, setAgainst] = useState({ rigId: "", sensorId: "" });
  const choices = useQuery(choicesOptions());
  const estimate = useQuery(estimateOptions({ definition: useLater(definition, 300), ...against }));
  const { version } = begun;

  const takes = estimate.data?.blocks;
  const editor = useMemo<Editor>(() => ({ draft, errors: sorted, takes: takes ?? {}, edit, open, setOpen, announce }), [draft, sorted, takes, edit, open]);
  const slotNames = useMemo(() => slotsIn(draft), [draft]);
  const rigName = choices.data?.rigs.find(({ id }) => id === against.rigId)?.name;
  const sensorSerial = choices.data?.sensors.find(({ id }) => id === against.sensorId)?.serial;
  const openAt = (path: string) => {
    const { id, field } = ownerOf(draft, path);
    if (id) setOpen({ id, field: field || undefined });
    else document.querySelector<HTMLElement>(`[data-field="${CSS.escape(field)}"]`)?.focus();
  };
  const places = errors.length;
  return (
    <EditorContext value={editor}>
      <PageTitle
        margin={<SavedNote state={saved} saver={saver} zone={zone} nextVersion={version + 1} />}
        crumbs={[{ label: "Protocols", href: "/protocols" }, ...(saved.id && version > 0 ? [{ label: nameOf(draft), href: `/protocols/${saved.id}` }] : []), { label: version === 0 ? "New protocol" : "Draft" }]}
        meta={version === 0 ? "This draft becomes version 1." : `Version ${version} stays as it is. This draft becomes version ${version + 1}.`}
        actions={
          <>
            <Button look="primary" notPossible={places > 0 ? `${inWords(places)} ${plural(places, "thing")} must be mended first` : null} onClick={() => setSaves(true)}>Save version {version + 1}</Button>
            <Button notPossible={canUndo ? null : "nothing has been changed"} onClick={undo}>Undo</Button>
            {saved.savedAt && <ThrowAway draft={draft} saver={saver} version={version} />}
            {saved.id && <LinkButton look="link" href={`/protocols/${saved.id}`}>Leave</LinkButton>}
          </>
        }
      >
        {nameOf(draft)}
      </PageTitle>
      <ProtocolFields slots={slotNames} />
      <Section
        head="Steps"
        note="A sentence opens its values. Alt and an arrow key move a step."
        controls={
          <div className="grid gap-3">
            <SelectField label="Checked against" value={against.rigId} onChange={(event) => setAgainst({ ...against, rigId: event.target.value })}>
              <option value="">no rig</option>
              {choices.data?.rigs.map(({ id, name }) => <option key={id} value={id}>{name}</option>)}
            </SelectField>
            <SelectField label="Sensor" value={against.sensorId} onChange={(event) => setAgainst({ ...against, sensorId: event.target.value })}>
              <option value="">a wire of 2 kHz</option>
              {choices.data?.sensors.map(({ id, serial, kind }) => <option key={id} value={id}>{serial}, {kind}</option>)}
            </SelectField>
          </div>
        }
      >
        <div className="protocol-body">
          <div>
            <div className="step-heads" aria-hidden="true"><span /><span>Step</span><span>Takes</span><span>Uses</span></div>
            <StepRows label="Steps" list="blocks" inside={null} blocks={draft.blocks} slots={slotNames} />
            {draft.blocks.length === 0 && <p className="text-ink2">No step yet.</p>}
            <div className="buttons border-t border-rule pt-2"><AddStep place={{ list: "blocks", inside: null, index: draft.blocks.length }} word="Add step" /></div>
          </div>
          <aside className="stays">
            {estimate.error && !estimate.data ? <Problem error={estimate.error} onRetry={() => void estimate.refetch()} /> : <EstimatePanel estimate={estimate.data} busy={estimate.isFetching} zone={zone} rigName={rigName} sensorSerial={sensorSerial} stale={!definition} />}
            {places > 0 && <MistakesPanel draft={draft} errors={errors} onOpen={openAt} />}
            {estimate.data && definition && <ProblemsPanel estimate={estimate.data} rigName={rigName} onOpen={openAt} />}
          </aside>
        </div>
      </Section>
      {LISTS.map((list) => (list === "blocks" ? null : <ListSection key={list} list={list} slots={slotNames} />))}
      <LimitsSection slots={slotNames} />
      <div className="visually-hidden" role="status" aria-live="polite">{said}</div>
      {saves && <SaveDialog draft={draft} saver={saver} version={version} onRefused={refuse} onClose={() => setSaves(false)} />}
    </EditorContext>
  );
}

const nameOf = ({ name }: Draft): string => (typeof name === "string" && name.trim() !== "" ? name : "Untitled");
