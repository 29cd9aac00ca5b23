"use client";

import type { KeyboardEvent } from "react";
import { classNames } from "@/components/ui/class-names";
import { Tag } from "@/components/ui/tag";
import type { SentencePart } from "@/lib/protocol/sentence";
import type { FieldErrors } from "@/lib/protocols/draft-errors";
import { FirstWord, isShort } from "../sentence";
import { useEditor } from "./editor-context";

type OpenSentenceProps = { id: string; parts: readonly SentencePart[]; more?: readonly SentencePart[]; errors: FieldErrors; onKeyDown?: (event: KeyboardEvent) => void };

/** A sentence that opens its fields; a press on an underlined value goes to that very field. */
export function OpenSentence({ id, parts, more, errors, onKeyDown }: OpenSentenceProps) {
  const { open, setOpen } = useEditor();
  const isOpen = open?.id === id;
  return (
    <button
      type="button"
      className="sentence-button"
      data-step={id}
      aria-expanded={isOpen}
      onKeyDown={onKeyDown}
      onClick={(event) => {
        const field = event.target instanceof HTMLElement ? event.target.dataset.path : undefined;
        setOpen(isOpen && field === undefined ? null : { id, field });
      }}
    >
      <Parts parts={parts} errors={errors} />
      {more && <span className="second"><Parts parts={more} errors={errors} /></span>}
    </button>
  );
}

function Parts({ parts, errors }: { parts: readonly SentencePart[]; errors: FieldErrors }) {
  return parts.map((part, index) => {
    if (typeof part === "string") return index === 0 ? <FirstWord key={index} text={part} /> : part;
    const isWrong = [...errors.keys()].some((field) => field === part.path || field.startsWith(`${part.path}.`) || part.path.startsWith(`${field}.`));
    return <span key={index} data-path={part.path} className={classNames("value typed", isShort(part.value) && "short", isWrong && "wrong")}>{part.value}</span>;
  });
}

/** What is wrong with a step whose fields are not open. */
export function Mistakes({ errors }: { errors: FieldErrors }) {
  if (errors.size === 0) return null;
  return (
    <ul className="mistakes">
      {[...errors].map(([field, message]) => <li key={field}><Tag kind="must" /> {message}.</li>)}
    </ul>
  );
}
