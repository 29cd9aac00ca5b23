"use client";

import { createContext, useContext } from "react";
import type { Draft } from "@/lib/protocols/draft";
import type { FieldErrors } from "@/lib/protocols/draft-errors";
import type { Edit } from "@/lib/protocols/edit";
import type { EstimateAnswer } from "@/lib/protocols/schema";

export type Editor = {
  draft: Draft;
  errors: ReadonlyMap<string, FieldErrors>;
  takes: EstimateAnswer["blocks"];
  edit: (edit: Edit) => void;
  /** The block or limit whose fields are shown, and the field that asked for it. */
  open: { id: string; field?: string } | null;
  setOpen: (open: { id: string; field?: string } | null) => void;
  /** Said to screen readers. */
  announce: (text: string) => void;
};

export const EditorContext = createContext<Editor | null>(null);

export function useEditor(): Editor {
  const editor = useContext(EditorContext);
  if (!editor) throw new Error("useEditor needs an EditorContext around it");
  return editor;
}

/** The record whose fields stand here: a block, a limit, or the protocol itself. */
export type FieldSource = { values: Readonly<Record<string, unknown>>; errors: FieldErrors; set: (path: string, value: unknown) => void; slots: readonly string[] };

export const FieldContext = createContext<FieldSource | null>(null);

export function useFields(): FieldSource {
  const fields = useContext(FieldContext);
  if (!fields) throw new Error("useFields needs a FieldContext around it");
  return fields;
}
