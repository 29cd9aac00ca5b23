"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { toast } from "sonner";
import { Button } from "@/components/ui/button";
import { Slip } from "@/components/ui/slip";
import { acknowledge } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { detailOf, titleOf } from "@/lib/alarms/words";
import { formatDuration } from "@/lib/format-time";

type AlarmSlipProps = { alarm: AlarmAnswer; now: string; may: boolean };

/** An alarm that nobody has: how long already, what, and "I have this". */
export function AlarmSlip({ alarm, now, may }: AlarmSlipProps) {
  const queries = useQueryClient();
  const take = useMutation({
    mutationFn: () => acknowledge(alarm.id),
    onSuccess: ({ acknowledgedBy }) => {
      toast(`${acknowledgedBy ?? "Somebody"} has it.`);
      return Promise.all(["alarms", "today", "me"].map((key) => queries.invalidateQueries({ queryKey: [key] })));
    },
  });
  const title = titleOf(alarm);
  const openS = (Date.parse(now) - Date.parse(alarm.openedAt)) / 1000;
  return (
    <Slip
      kind="alarm"
      when={`Open for ${formatDuration(Math.max(0, openS))}`}
      remark={mailedOf(alarm)}
      title={title.startsWith("could not") ? `${alarm.rig} ${title}` : `${alarm.rig}: ${title}`}
      actions={
        <>
          {may && <Button look="primary" busy={take.isPending} onClick={() => take.mutate()}>I have this</Button>}
          <Link className="button link" href={`/alarms/${alarm.id}`}>Look closer</Link>
        </>
      }
    >
      <p>{[detailOf(alarm), alarm.actionText].filter(Boolean).join(" ")}</p>
      {take.error && <p role="alert">{take.error.message}</p>}
    </Slip>
  );
}

/** "e-mailed to 3 people, nobody has it" */
function mailedOf({ events }: AlarmAnswer): string {
  const people = events.findLast(({ kind }) => kind === "mailed")?.text.match(/\d+ (person|people)/)?.[0];
  return people ? `e-mailed to ${people}, nobody has it` : "nobody has it";
}
