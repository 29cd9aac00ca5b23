"use client";

import { Section } from "@/components/ui/page";
import type { ListName } from "@/lib/protocols/draft";
import { AddStep } from "./add-step";
import { useEditor } from "./editor-context";
import { StepRows } from "./step-rows";

const WORDS: Readonly<Record<Exclude<ListName, "blocks">, { head: string; note: string; none: string }>> = {
  cleaning: { head: "Clean again", note: "What a limit that cleans again puts in, before the reference.", none: "Without it no limit can clean again." },
  park: { head: "Park", note: "What runs when the campaign is stopped or long held, and the cell is not empty.", none: "Without it a stopped campaign leaves its liquid in the cell." },
};

/** Steps beside the main line. */
export function ListSection({ list, slots }: { list: Exclude<ListName, "blocks">; slots: readonly string[] }) {
  const { draft } = useEditor();
  const blocks = draft[list] ?? [];
  const { head, note, none } = WORDS[list];
  return (
    <Section head={head} note={note}>
      {blocks.length > 0 ? <StepRows label={head} list={list} inside={null} blocks={blocks} slots={slots} /> : <p className="text-ink2">{none}</p>}
      <div className="buttons mt-2"><AddStep place={{ list, inside: null, index: blocks.length }} word="Add step" /></div>
    </Section>
  );
}
