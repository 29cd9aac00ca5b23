"use client";

import { useCallback, useEffect, useMemo, useReducer, useState, useSyncExternalStore } from "react";
import { ProblemError } from "@/lib/http/fetch-json";
import { type Definition, type DefinitionError, parseDefinition } from "@/lib/protocol/schema";
import { storeDraft } from "@/lib/protocols/client";
import type { Draft } from "@/lib/protocols/draft";
import { sortErrors } from "@/lib/protocols/draft-errors";
import { DraftSaver } from "@/lib/protocols/draft-saver";
import { editDraft, type Edit } from "@/lib/protocols/edit";
import { makeId } from "./make-id";

export type Begun = {
  /** null: a protocol that is not stored yet. */
  protocolId: string | null;
  draft: Draft;
  draftSavedAt: string | null;
  /** Number of the newest version, 0 without one. */
  version: number;
};

const NO_ERRORS: readonly DefinitionError[] = [];

/** The draft, its mistakes, what undo goes back to, and the saving of it by itself. */
export function useDraftEditor({ protocolId, draft: begun, draftSavedAt }: Begun) {
  const [state, dispatch] = useReducer(editDraft, { draft: begun, past: [] });
  const [saver] = useState(() => new DraftSaver({ id: protocolId, savedAt: draftSavedAt, store: storeDraft, isConflict: (error) => error instanceof ProblemError && error.code === "draft-changed" }));
  const saved = useSyncExternalStore(saver.subscribe, saver.get, saver.get);
  const [refused, setRefused] = useState<{ draft: Draft; errors: readonly DefinitionError[] }>();

  const { draft } = state;
  useEffect(() => {
    if (draft !== begun) saver.change(draft);
  }, [draft, begun, saver]);
  useKeptOnLeaving(saver);
  useEffect(() => {
    // From the first save on, a reload comes back to this draft.
    if (saved.id !== null && protocolId === null) window.history.replaceState(null, "", `/protocols/${saved.id}/edit`);
  }, [saved.id, protocolId]);

  const parsed = useMemo(() => parseDefinition(draft, makeId), [draft]);
  const fromServer = refused?.draft === draft ? refused.errors : NO_ERRORS;
  const errors = useMemo(() => [...(parsed.ok ? [] : parsed.errors), ...fromServer], [parsed, fromServer]);
  const sorted = useMemo(() => sortErrors(draft, errors), [draft, errors]);
  const definition: Definition | undefined = parsed.ok ? parsed.definition : undefined;
  return {
    draft,
    definition,
    errors,
    sorted,
    saver,
    saved,
    canUndo: state.past.length > 0,
    edit: useCallback((edit: Edit) => dispatch(edit), []),
    undo: useCallback(() => dispatch({ do: "undo" }), []),
    /** Mistakes that only the server can find, such as a name that is taken; they stand until the next edit. */
    refuse: useCallback((found: readonly DefinitionError[]) => setRefused({ draft, errors: found }), [draft]),
  };
}

/** What was typed in the last moment goes out as the page is left; a page that closes cannot wait for the answer. */
function useKeptOnLeaving(saver: DraftSaver): void {
  useEffect(() => {
    const onHide = () => {
      const { id, savedAt, status } = saver.get();
      const draft = saver.unsaved;
      // While another save is under way, a second one would make the protocol twice or meet the first: `warn` has asked to wait.
      if (!draft || saver.isSaving || status === "conflict") return;
      const [path, method, body] = id === null ? ["/api/protocols/drafts", "POST", { draft }] : [`/api/protocols/${id}`, "PATCH", { draft, draftBasedOn: savedAt }];
      void fetch(path, { method, keepalive: true, headers: { "Content-Type": "application/json" }, body: JSON.stringify(body) }).catch(() => undefined);
    };
    const warn = (event: BeforeUnloadEvent) => {
      if (saver.unsaved && saver.get().status !== "waiting") event.preventDefault();
    };
    window.addEventListener("pagehide", onHide);
    window.addEventListener("beforeunload", warn);
    return () => {
      window.removeEventListener("pagehide", onHide);
      window.removeEventListener("beforeunload", warn);
      void saver.flush();
    };
  }, [saver]);
}
