"use client";

import { Button } from "@/components/ui/button";
import { formatSecond } from "@/lib/format-time";
import type { DraftSaver, SaverState } from "@/lib/protocols/draft-saver";

type SavedNoteProps = { state: SaverState; saver: DraftSaver; zone: string; nextVersion: number };

/** How the draft is kept, in the margin of the title. */
export function SavedNote({ state, saver, zone, nextVersion }: SavedNoteProps) {
  return (
    <>
      <h2>Draft of version {nextVersion}</h2>
      <div role="status">{words(state, zone)}</div>
      {state.status === "conflict" && (
        <div className="buttons mt-2">
          <Button small onClick={() => window.location.reload()}>Read theirs</Button>
          <Button small onClick={() => void saver.overwrite()}>Keep mine</Button>
        </div>
      )}
      {state.status === "failed" && <div className="buttons mt-2"><Button small onClick={() => void saver.flush()}>Try now</Button></div>}
    </>
  );
}

function words({ status, savedAt, message }: SaverState, zone: string): string {
  switch (status) {
    case "saved":
      return savedAt ? `Saved by itself at ${formatSecond(savedAt, zone)}` : "Nothing has been changed yet";
    case "waiting":
    case "saving":
      return "Saving";
    case "failed":
      return `Not saved, kept here and tried again: ${message ?? "no answer"}`;
    case "conflict":
      return "Somebody saved this draft elsewhere. What you wrote stands here and is not saved.";
  }
}
