"use client";

import { useMutation } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Option, OptionGroup, TextField } from "@/components/ui/field";
import { shelve } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { titleOf } from "@/lib/alarms/words";
import { formatRecent, startOfLocalDay } from "@/lib/format-time";

const HOUR_MS = 3_600_000;

export function ShelveDialog({ alarm, now, onClose }: { alarm: AlarmAnswer; now: string; onClose: () => void }) {
  const [chosen, setChosen] = useState(0);
  const [note, setNote] = useState("");
  const times = endsFrom(now, alarm.timeZone);
  const save = useMutation({ mutationFn: () => shelve(alarm.id, new Date(times[chosen].at), note.trim() || undefined), onSuccess: onClose });
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Shelve “${titleOf(alarm)}”`} description="It is not counted and sends no mail until then. If it is still beyond its limit it comes back, and mail goes out.">
      <div className="mt-3 grid gap-4">
        <OptionGroup legend="Until">
          {times.map(({ at, label }, i) => (
            <Option key={label} type="radio" name="until" checked={chosen === i} onChange={() => setChosen(i)} note={formatRecent(at, alarm.timeZone, now)}>{label}</Option>
          ))}
        </OptionGroup>
        <TextField label="Why" maxLength={2000} value={note} onChange={(event) => setNote(event.target.value)} error={save.error?.message} />
        <div className="buttons">
          <Button look="primary" busy={save.isPending} onClick={() => save.mutate()}>Shelve</Button>
          <Button look="link" onClick={onClose}>Cancel</Button>
        </div>
      </div>
    </Dialog>
  );
}

function endsFrom(now: string, zone: string): { at: number; label: string }[] {
  const ms = Date.parse(now);
  const tomorrow = startOfLocalDay(startOfLocalDay(ms, zone) + 30 * HOUR_MS, zone) + 8 * HOUR_MS;
  return [
    { at: ms + 4 * HOUR_MS, label: "For four hours" },
    { at: tomorrow, label: "Until tomorrow morning" },
    { at: ms + 3 * 24 * HOUR_MS, label: "For three days" },
  ];
}
