"use client";

import { onlineManager, useMutation, useQueryClient } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";
import { toast } from "sonner";
import { Button } from "@/components/ui/button";
import { Slip } from "@/components/ui/slip";
import { formatAgo, formatRecent, formatTime } from "@/lib/format-time";
import { answerTask, wasteEmptied, type Answer } from "@/lib/tasks/client";
import type { TaskAnswer } from "@/lib/tasks/schema";
import { CannotDialog } from "./cannot-dialog";
import { LoadForTask } from "./load-for-task";
import { MountForTask } from "./mount-for-task";

type TaskSlipProps = { task: TaskAnswer; now: string; may: boolean; inHand?: boolean };

const VERBS: Readonly<Record<TaskAnswer["kind"], string>> = {
  ask: "Done",
  look: "Cell is empty",
  lot: "Done",
  other: "Done",
  waste: "Emptied",
  load: "Bottle loaded",
  mount: "Mounted",
};

/** A task with its verbs. An answer given without a network is kept, and goes out by itself when there is one. */
export function TaskSlip({ task, now, may, inHand }: TaskSlipProps) {
  const [asks, setAsks] = useState<"cannot" | "load" | "mount">();
  const [given, setGiven] = useState<{ verb: string; at: string }>();
  const queries = useQueryClient();
  const refresh = () => Promise.all(["tasks", "today", "rigs", "campaigns", "alarms"].map((key) => queries.invalidateQueries({ queryKey: [key] })));
  const send = useMutation({
    mutationFn: async (answer: Omit<Answer, "taskId">) => {
      if (task.kind === "waste" && answer.answer === "done") await wasteEmptied(task.rigId);
      else await answerTask({ taskId: task.id, ...answer });
    },
    retry: (failures, error) => failures < 5 && "status" in error && error.status === 0,
    onSuccess: (_, { answer }) => {
      toast(answer === "done" ? `Done: ${headOf(task)}` : "Told as an alarm; the campaign waits.");
      return refresh();
    },
    onError: () => setGiven(undefined),
  });
  const answer = (said: Omit<Answer, "taskId">, verb: string) => {
    setGiven({ verb, at: new Date().toISOString() });
    send.mutate(said);
  };
  const done = () => {
    if (task.kind === "load" && task.port !== undefined) setAsks("load");
    else if (task.kind === "mount" && task.sensorId) setAsks("mount");
    else answer({ answer: "done" }, VERBS[task.kind]);
  };
  const close = () => {
    setAsks(undefined);
    void refresh();
  };

  if (given && send.isPaused && !onlineManager.isOnline()) {
    return (
      <Slip kind="sending" when={`Answered ${formatTime(given.at, task.timeZone)}`} status="Sending" title={headOf(task)} actions={<Button look="link" onClick={() => { send.reset(); setGiven(undefined); }}>Take it back</Button>}>
        <p>You said <b>{given.verb}</b>. It waits on this page and goes out when there is a network again.</p>
      </Slip>
    );
  }
  return (
    <Slip
      inHand={inHand || asks !== undefined}
      when={whenOf(task, now)}
      remark={task.dueAt && formatAgo(task.dueAt, now)}
      title={headOf(task)}
      actions={
        may && (
          <>
            <Button look="primary" busy={send.isPending} onClick={done}>{VERBS[task.kind]}</Button>
            <Button busy={send.isPending} onClick={() => setAsks("cannot")}>Cannot</Button>
          </>
        )
      }
    >
      <p>{restOf(task)}</p>
      {send.error && <p role="alert" className="font-medium">{send.error.message}</p>}
      {asks === "cannot" && (
        <CannotDialog
          title={headOf(task)}
          holds={task.holds}
          onClose={() => setAsks(undefined)}
          onCannot={(note) => {
            setAsks(undefined);
            answer({ answer: "cannot", note }, "Cannot");
          }}
        />
      )}
      {asks === "load" && task.port !== undefined && <LoadForTask rigId={task.rigId} port={task.port} onClose={close} />}
      {asks === "mount" && task.sensorId && <MountForTask sensorId={task.sensorId} rigId={task.rigId} onClose={close} />}
    </Slip>
  );
}

/** The first sentence, with the rig where it does not name it. */
function headOf({ instruction, rig }: TaskAnswer): string {
  const head = instruction.split(/(?<=\.)\s|: /, 1)[0].replace(/\.$/, "");
  return head.includes(rig) ? head : `${head}, ${rig}`;
}

function restOf({ instruction, campaign, holds }: TaskAnswer): ReactNode {
  const head = instruction.split(/(?<=\.)\s|: /, 1)[0];
  const rest = instruction.slice(head.length).replace(/^[:.\s]+/, "");
  const said = rest && `${rest.charAt(0).toUpperCase()}${rest.slice(1)}`;
  return [said, campaign && (holds ? `${campaign} waits for it.` : `For ${campaign}.`)].filter(Boolean).join(" ");
}

function whenOf({ dueAt, createdAt, timeZone, holds }: TaskAnswer, now: string): string {
  if (dueAt) return formatRecent(dueAt, timeZone, now).replace(/ (?=[\d:]+$)/, " by ");
  return `${holds ? "Waits since" : "Since"} ${formatRecent(createdAt, timeZone, now).replace("Today ", "")}`;
}
