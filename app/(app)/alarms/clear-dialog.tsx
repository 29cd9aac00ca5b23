"use client";

import { useMutation } from "@tanstack/react-query";
import { useState } from "react";
import { ConfirmDialog } from "@/components/ui/dialog";
import { TextAreaField } from "@/components/ui/field";
import { clear } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { titleOf } from "@/lib/alarms/words";

export function ClearDialog({ alarm, onClose }: { alarm: AlarmAnswer; onClose: () => void }) {
  const [note, setNote] = useState("");
  const save = useMutation({ mutationFn: () => clear(alarm.id, note.trim()), onSuccess: onClose });
  return (
    <ConfirmDialog
      open
      onOpenChange={(open) => !open && onClose()}
      title={`Clear “${titleOf(alarm)}”?`}
      cost="It moves to the past ones. A campaign that it holds stays held until a person lets it go on; a new breach opens a new alarm."
      keep="Leave it open"
      act="Clear"
      busy={save.isPending}
      notPossible={note.trim() ? null : "a note says why"}
      onAct={() => save.mutate()}
    >
      <TextAreaField label="Note" hint="What was found and done" maxLength={2000} value={note} error={save.error?.message} onChange={(event) => setNote(event.target.value)} />
    </ConfirmDialog>
  );
}
