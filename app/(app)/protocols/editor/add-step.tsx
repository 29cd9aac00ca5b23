"use client";

import { Button } from "@/components/ui/button";
import { Menu, MenuItem } from "@/components/ui/menu";
import type { Place } from "@/lib/protocols/edit-blocks";
import { BLOCK_WORDS, type BlockKind, newBlock } from "@/lib/protocols/new-block";
import { useEditor } from "./editor-context";
import { makeId } from "./make-id";

const KINDS = Object.keys(BLOCK_WORDS) as BlockKind[];

/** A menu of all kinds of steps; the chosen one is put in and opened. */
export function AddStep({ place, word, quiet }: { place: Place; word: string; quiet?: boolean }) {
  const { edit, setOpen, announce } = useEditor();
  const add = (kind: BlockKind) => {
    const block = newBlock(kind, makeId);
    edit({ do: "insert", place, block });
    announce(`Added: ${BLOCK_WORDS[kind].word}`);
    // The menu gives the focus back to its button as it closes; the new step's field is to have it.
    setTimeout(() => setOpen({ id: block.id }), 0);
  };
  return (
    <Menu label="Kinds of steps" trigger={<Button small look={quiet ? "link" : "plain"}>{word}</Button>}>
      {KINDS.map((kind) => <MenuItem key={kind} note={BLOCK_WORDS[kind].what} onSelect={() => add(kind)}>{BLOCK_WORDS[kind].word}</MenuItem>)}
    </Menu>
  );
}
