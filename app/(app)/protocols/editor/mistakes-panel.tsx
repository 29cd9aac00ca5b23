"use client";

import { limitParts } from "@/lib/protocol/limit-sentence";
import { sentenceParts, textOf } from "@/lib/protocol/sentence";
import type { Draft } from "@/lib/protocols/draft";
import { ownerOf } from "@/lib/protocols/draft-errors";
import { findBlock } from "@/lib/protocols/edit-blocks";

const MOST_SHOWN = 12;

type MistakesPanelProps = { draft: Draft; errors: readonly { path: string; message: string }[]; onOpen: (path: string) => void };

/** What must be mended before the draft can become a version; each leads to its field. */
export function MistakesPanel({ draft, errors, onOpen }: MistakesPanelProps) {
  return (
    <section aria-live="polite">
      <h3>Before it can be saved</h3>
      <ul className="mistakes">
        {errors.slice(0, MOST_SHOWN).map(({ path, message }) => (
          <li key={`${path} ${message}`}>
            {whereOf(draft, path)}: <button type="button" className="text-left underline decoration-rule3 underline-offset-[3px]" onClick={() => onOpen(path)}>{message}</button>.
          </li>
        ))}
      </ul>
      {errors.length > MOST_SHOWN && <p className="caption">And {errors.length - MOST_SHOWN} more.</p>}
    </section>
  );
}

/** The step or limit in its own words, cut short. */
function whereOf(draft: Draft, path: string): string {
  const { id } = ownerOf(draft, path);
  const block = findBlock(draft, id);
  const limit = draft.limits.find((one) => one.id === id);
  const text = block ? textOf(sentenceParts(block)) : limit ? textOf(limitParts(limit)) : "The protocol";
  return text.length <= 28 ? text.replace(/\.$/, "") : `${text.slice(0, 26).trimEnd()}…`;
}
