"use client";

import { useState, type ReactNode } from "react";

/** Choices of the margin; on a phone folded into the sentence that says what is chosen. */
export function Folded({ sentence, children }: { sentence: ReactNode; children: ReactNode }) {
  const [open, setOpen] = useState(false);
  return (
    <div className="folded" data-open={open || undefined}>
      <button type="button" aria-expanded={open} onClick={() => setOpen(!open)}>{sentence}. <span className="underline underline-offset-[3px]">{open ? "Done" : "Change"}</span></button>
      <div>{children}</div>
    </div>
  );
}
