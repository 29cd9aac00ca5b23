"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { acknowledge, shelve } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { ClearDialog } from "./clear-dialog";
import { ShelveDialog } from "./shelve-dialog";

/** I have this, Clear, Shelve, Bring back now: what the alarm's state allows. */
export function AlarmVerbs({ alarm, now, may }: { alarm: AlarmAnswer; now: string; may: boolean }) {
  const [asks, setAsks] = useState<"clear" | "shelve">();
  const queries = useQueryClient();
  const refresh = () => Promise.all(["alarms", "today", "me"].map((key) => queries.invalidateQueries({ queryKey: [key] })));
  const take = useMutation({ mutationFn: () => acknowledge(alarm.id), onSuccess: refresh });
  const bringBack = useMutation({ mutationFn: () => shelve(alarm.id, null), onSuccess: refresh });
  const error = take.error ?? bringBack.error;
  const close = () => {
    setAsks(undefined);
    void refresh();
  };
  if (!may || alarm.state === "cleared") return null;

  const nobodys = alarm.state === "unacknowledged" || alarm.state === "returned";
  return (
    <>
      <div className="buttons">
        {alarm.shelvedUntil ? (
          <Button small busy={bringBack.isPending} onClick={() => bringBack.mutate()}>Bring back now</Button>
        ) : (
          nobodys && <Button small look="primary" busy={take.isPending} onClick={() => take.mutate()}>I have this</Button>
        )}
        <Button small onClick={() => setAsks("clear")}>Clear</Button>
        {!alarm.shelvedUntil && <Button small onClick={() => setAsks("shelve")}>Shelve</Button>}
      </div>
      {error && <p role="alert" className="font-medium">{error.message}</p>}
      {asks === "clear" && <ClearDialog alarm={alarm} onClose={close} />}
      {asks === "shelve" && <ShelveDialog alarm={alarm} now={now} onClose={close} />}
    </>
  );
}
