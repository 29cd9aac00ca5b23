"use client";

import { type KeyboardEvent, useMemo } from "react";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { formatVolume, NO_VALUE } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";
import { sentenceParts, sweepParts, textOf } from "@/lib/protocol/sentence";
import { copyBlock, type DraftBlock, type ListName } from "@/lib/protocols/draft";
import { errorsOf } from "@/lib/protocols/draft-errors";
import { blocksAt, moveBlock, placeOf } from "@/lib/protocols/edit-blocks";
import { repeatFoot } from "../repeat-words";
import { StepChip } from "../step-chip";
import { AddStep } from "./add-step";
import { BlockFields } from "./block-fields";
import { FieldContext, type FieldSource, useEditor } from "./editor-context";
import { makeId } from "./make-id";
import { Mistakes, OpenSentence } from "./open-sentence";
import { useFocusField } from "./use-focus-field";

type StepRowsProps = { label: string; list: ListName; inside: string | null; blocks: readonly DraftBlock[]; slots: readonly string[] };

/** Steps of one list or container, each of which opens in place. */
export function StepRows({ label, list, inside, blocks, slots, check }: StepRowsProps & { check?: DraftBlock }) {
  return (
    <ol className="step-list" aria-label={label}>
      {blocks.map((block) => <StepRow key={block.id} block={block} list={list} slots={slots} />)}
      {inside !== null && <li className="step-add"><AddStep quiet place={{ list, inside, index: blocks.length }} word="Add a step in here" /></li>}
      {check && <StepRow block={check} list={list} slots={slots} isCheck />}
    </ol>
  );
}

type StepRowProps = { block: DraftBlock; list: ListName; slots: readonly string[]; isCheck?: boolean };

function StepRow({ block, list, slots, isCheck = false }: StepRowProps) {
  const { errors: all, takes, open } = useEditor();
  const verbs = useStepVerbs(block);
  const isOpen = open?.id === block.id;
  const errors = errorsOf(all, block.id);
  const onKeyDown = isCheck ? undefined : verbs.onKeyDown;
  const own = (
    <>
      <OpenSentence id={block.id} parts={sentenceParts(block)} more={block.kind === "measure" ? sweepParts(block) : undefined} errors={errors} onKeyDown={onKeyDown} />
      {!isOpen && <Mistakes errors={errors} />}
      {isOpen && <Sheet block={block} slots={slots} isCheck={isCheck} onKeyDown={onKeyDown} />}
    </>
  );
  if (block.blocks)
    return (
      <li className="repeat-block">
        <div className={classNames("repeat-head", isOpen && "being-edited")}><div className="words">{own}</div></div>
        <StepRows label={textOf(sentenceParts(block))} list={list} inside={block.id} blocks={block.blocks} slots={slots} check={block.measure} />
        <div className="repeat-foot">{repeatFoot(block)}</div>
      </li>
    );
  const { seconds, ml = 0 } = takes[block.id] ?? {};
  return (
    <li className={classNames("step", isOpen && "being-edited")}>
      <StepChip block={block} />
      <div className="words">{own}</div>
      {list === "blocks" && <span className={classNames("amount num", seconds === undefined && "none")}>{seconds === undefined ? NO_VALUE : formatDuration(seconds)}</span>}
      {list === "blocks" && <span className={classNames("amount num", ml === 0 && "none")}>{ml > 0 ? formatVolume(ml) : NO_VALUE}</span>}
    </li>
  );
}

function Sheet({ block, slots, isCheck, onKeyDown }: Omit<StepRowProps, "list"> & { onKeyDown?: (event: KeyboardEvent) => void }) {
  const { draft, edit, errors: all, open, setOpen } = useEditor();
  const verbs = useStepVerbs(block);
  const errors = errorsOf(all, block.id);
  const sheet = useFocusField(true, open?.field);
  const place = isCheck ? undefined : placeOf(draft, block.id);
  const source = useMemo<FieldSource>(
    () => ({ values: block, errors, slots, set: (path, value) => edit({ do: "set in block", id: block.id, path, value }) }),
    [block, errors, slots, edit],
  );
  const general = errors.get("") ?? errors.get("blocks");
  const close = () => {
    setOpen(null);
    focusStep(block.id);
  };
  return (
    <FieldContext value={source}>
      <div
        className="sheet-fields"
        ref={sheet}
        role="group"
        aria-label={textOf(sentenceParts(block))}
        onKeyDown={(event) => {
          if (event.key === "Escape") close();
          else onKeyDown?.(event);
        }}
      >
        <BlockFields kind={block.kind} isCheck={isCheck ?? false} />
        {general && <p className="whole error">{general}.</p>}
        <div className="buttons whole">
          <Button small look="primary" onClick={close}>Done</Button>
          {place && (
            <>
              <Button small onClick={() => verbs.move("up")} notPossible={verbs.cannotMove("up")}>Move up</Button>
              <Button small onClick={() => verbs.move("down")} notPossible={verbs.cannotMove("down")}>Move down</Button>
              <Button small onClick={verbs.duplicate}>Duplicate</Button>
              <Button small onClick={verbs.remove}>Remove</Button>
              <AddStep place={{ ...place, index: place.index + 1 }} word="Add a step below" />
            </>
          )}
        </div>
      </div>
    </FieldContext>
  );
}

/** What can be done with a step as a whole; Alt and an arrow key move it. */
function useStepVerbs(block: DraftBlock) {
  const { draft, edit, setOpen, announce } = useEditor();
  const name = textOf(sentenceParts(block));
  const move = (direction: "up" | "down") => {
    const after = moveBlock(draft, block.id, direction);
    const place = after === draft ? undefined : placeOf(after, block.id);
    if (!place) return announce(`${name} stays: it is at the end of its list.`);
    edit({ do: "move", id: block.id, direction });
    const holder = place.inside === null ? undefined : after && holderName(after, place.inside);
    announce(`${name} is now step ${place.index + 1} of ${blocksAt(after, place).length}${holder ? ` in ${holder}` : ""}.`);
    focusStep(block.id);
  };
  return {
    move,
    cannotMove: (direction: "up" | "down") => (moveBlock(draft, block.id, direction) === draft ? "it is at the end of its list" : null),
    duplicate: () => {
      const place = placeOf(draft, block.id);
      if (!place) return;
      const copy = copyBlock(block, makeId);
      edit({ do: "insert", place: { ...place, index: place.index + 1 }, block: copy });
      setOpen({ id: copy.id });
      announce(`Duplicated: ${name}`);
    },
    remove: () => {
      const place = placeOf(draft, block.id);
      if (!place) return;
      const siblings = blocksAt(draft, place);
      const next = (siblings[place.index + 1] ?? siblings[place.index - 1])?.id ?? place.inside;
      edit({ do: "remove", id: block.id });
      setOpen(null);
      announce(`Removed: ${name} Undo brings it back.`);
      if (next) focusStep(next);
    },
    onKeyDown: (event: KeyboardEvent) => {
      if (!event.altKey || (event.key !== "ArrowUp" && event.key !== "ArrowDown")) return;
      event.preventDefault();
      event.stopPropagation();
      move(event.key === "ArrowUp" ? "up" : "down");
    },
  };
}

function holderName(draft: Parameters<typeof placeOf>[0], id: string): string | undefined {
  const place = placeOf(draft, id);
  const holder = place && blocksAt(draft, place)[place.index];
  return holder && textOf(sentenceParts(holder));
}

/** After React has drawn the list anew. */
function focusStep(id: string): void {
  requestAnimationFrame(() => document.querySelector<HTMLElement>(`[data-step="${CSS.escape(id)}"]`)?.focus());
}
