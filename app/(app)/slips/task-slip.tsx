"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Slip } from "@/components/ui/slip";
import { useOfflineSince } from "@/components/ui/use-offline-since";
import { formatAgo, formatRecent } from "@/lib/format-time";
import type { KeptAnswer } from "@/lib/tasks/outbox";
import type { TaskAnswer } from "@/lib/tasks/schema";
import { useOutbox } from "../outbox/outbox-provider";
import { LoadPort } from "../record/load-port";
import { MountSensor } from "../record/mount-sensor";
import { CannotDialog } from "./cannot-dialog";
import { SendingSlip } from "./sending-slip";
import { headOf, restOf } from "./task-words";
import { useAtHand } from "./use-at-hand";

type TaskSlipProps = { task: TaskAnswer; now: string; may: boolean; inHand?: boolean; /** Puts it off; the slip has no such verb without it. */ onLater?: () => void };

const VERBS: Readonly<Record<TaskAnswer["kind"], string>> = {
  ask: "Done",
  look: "Cell is empty",
  lot: "Done",
  other: "Done",
  waste: "Emptied",
  load: "Bottle loaded",
  mount: "Mounted",
};

/** A task with its verbs. An answer is kept on this device until it is out, with or without a network. */
export function TaskSlip({ task, now, may, inHand, onLater }: TaskSlipProps) {
  const [asks, setAsks] = useState<"cannot" | "load" | "mount">();
  const { items, give, takeBack } = useOutbox();
  const isOffline = useOfflineSince() !== undefined;
  useAtHand(may ? task : undefined);
  const kept = items.find(({ taskId }) => taskId === task.id);
  const waits = kept !== undefined && kept.refusal === undefined;
  const close = () => setAsks(undefined);

  const keep = (verb: string, call: Pick<KeptAnswer, "path" | "body"> & { key?: string }) => {
    close();
    give({ ...call, taskId: task.id, verb, title: headOf(task), timeZone: task.timeZone });
  };
  const answer = (said: "done" | "cannot", note?: string) =>
    keep(said === "cannot" ? "Cannot" : VERBS[task.kind], { path: `/api/tasks/${task.id}/answer`, body: { answer: said, ...(note && { note }) } });
  const done = () => {
    if (task.kind === "load" && task.port !== undefined) setAsks("load");
    else if (task.kind === "mount" && task.sensorId) setAsks("mount");
    else if (task.kind === "waste") keep(VERBS.waste, { path: `/api/rigs/${task.rigId}/waste-emptied`, body: {} });
    else answer("done");
  };

  if (waits && (isOffline || kept.tries > 0)) return <SendingSlip kept={kept} onTakeBack={() => takeBack(kept.key)} />;
  return (
    <Slip
      inHand={inHand || asks !== undefined}
      when={whenOf(task, now)}
      remark={task.dueAt && formatAgo(task.dueAt, now)}
      title={headOf(task)}
      actions={
        may && (
          <>
            <Button look="primary" busy={waits} onClick={done}>{VERBS[task.kind]}</Button>
            <Button busy={waits} onClick={() => setAsks("cannot")}>Cannot</Button>
            {onLater && <Button look="link" onClick={onLater}>Later</Button>}
          </>
        )
      }
    >
      <p>{restOf(task)}</p>
      {kept?.refusal && <p role="alert" className="font-medium">It was not taken: {kept.refusal}</p>}
      {asks === "cannot" && <CannotDialog title={headOf(task)} holds={task.holds} onClose={close} onCannot={(note) => answer("cannot", note)} />}
      {asks === "load" && task.port !== undefined && <LoadPort rigId={task.rigId} port={task.port} onClose={close} onKeep={(call) => keep(VERBS.load, call)} />}
      {asks === "mount" && task.sensorId && <MountSensor sensorId={task.sensorId} rigId={task.rigId} onClose={close} onKeep={(call) => keep(VERBS.mount, call)} />}
    </Slip>
  );
}


function whenOf({ dueAt, createdAt, timeZone, holds }: TaskAnswer, now: string): string {
  if (dueAt) return formatRecent(dueAt, timeZone, now).replace(/ (?=[\d:]+$)/, " by ");
  return `${holds ? "Waits since" : "Since"} ${formatRecent(createdAt, timeZone, now).replace("Today ", "")}`;
}
