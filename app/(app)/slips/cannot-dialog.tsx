"use client";

import { useState } from "react";
import { ConfirmDialog } from "@/components/ui/dialog";
import { TextAreaField } from "@/components/ui/field";

type CannotDialogProps = { title: string; holds: boolean; onClose: () => void; onCannot: (note: string | undefined) => void };

export function CannotDialog({ title, holds, onClose, onCannot }: CannotDialogProps) {
  const [note, setNote] = useState("");
  return (
    <ConfirmDialog
      open
      onOpenChange={(open) => !open && onClose()}
      title={`Cannot: ${title}?`}
      cost={`An alarm is opened and everybody concerned is told by e-mail.${holds ? " The campaign waits until a person lets it go on." : ""}`}
      keep="Back"
      act="Cannot"
      onAct={() => onCannot(note.trim() || undefined)}
    >
      <TextAreaField label="Why" hint="Colleagues read it in the alarm" maxLength={2000} value={note} onChange={(event) => setNote(event.target.value)} />
    </ConfirmDialog>
  );
}
