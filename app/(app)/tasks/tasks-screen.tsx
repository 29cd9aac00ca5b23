"use client";

import { useQuery } from "@tanstack/react-query";
import { PageSentence, Section } from "@/components/ui/page";
import { Slips } from "@/components/ui/slip";
import { Empty, Loading, Offline, Problem } from "@/components/ui/states";
import { useOfflineSince } from "@/components/ui/use-offline-since";
import { openAlarmsOptions } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { capitalised, inWords, listOf, plural } from "@/lib/format";
import { formatDay, formatTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { tasksOptions } from "@/lib/tasks/client";
import { useOutbox } from "../outbox/outbox-provider";
import { AlarmSlip } from "../slips/alarm-slip";
import { RefusedSlip, SendingSlip } from "../slips/sending-slip";
import { TaskSlip } from "../slips/task-slip";
import { DoneToday } from "./done-today";

type TasksScreenProps = { role: Role; name: string; zone: string; asOf: string };

/** What a person at the rigs has to do, for a phone first: alarms that nobody has, then tasks by when they are due. */
export function TasksScreen({ role, name, zone, asOf }: TasksScreenProps) {
  const tasks = useQuery(tasksOptions());
  const alarms = useQuery(openAlarmsOptions());
  const { items: kept, takeBack } = useOutbox();
  const offlineSince = useOfflineSince();
  const error = tasks.error ?? alarms.error;
  const retry = () => void Promise.all([tasks.refetch(), alarms.refetch()]);
  if (!tasks.data || !alarms.data) return <Section>{error ? <Problem error={error} onRetry={retry} /> : <Loading label="the tasks" height={240} />}</Section>;

  const readAt = Math.max(tasks.dataUpdatedAt, Date.parse(asOf));
  const now = new Date(readAt).toISOString();
  const nobodyHas = alarms.data.items.filter(isNobodys);
  const { items, nextCursor } = tasks.data;
  const unsent = kept.filter(({ refusal }) => refusal === undefined);
  const open = items.filter(({ id }) => !unsent.some(({ taskId }) => taskId === id));
  const gone = kept.filter(({ taskId }) => !items.some(({ id }) => id === taskId));
  return (
    <>
      <PageSentence margin={<><b className="text-ink">{formatDay(now, zone, now)}</b> for {name}</>}>
        {sentenceOf({ alarms: nobodyHas.length, tasks: open.length, more: nextCursor !== null, unsent: unsent.length })}
      </PageSentence>
      <div className="page-row">
        <div className="margin" />
        <div className="body tasks-column">
          {error && !offlineSince && <Offline asOf={formatTime(now, zone)} onTryNow={retry} />}
          {nobodyHas.length + items.length + gone.length > 0 ? (
            <Slips column>
              {nobodyHas.map((alarm) => <AlarmSlip key={alarm.id} alarm={alarm} now={now} may={may(role, "handle alarms")} />)}
              {items.map((task, i) => <TaskSlip key={task.id} task={task} now={now} may={may(role, "answer tasks")} inHand={i === 0 && nobodyHas.length === 0} />)}
              {gone.map((one) => (one.refusal ? <RefusedSlip key={one.key} kept={one} onSeen={() => takeBack(one.key)} /> : <SendingSlip key={one.key} kept={one} onTakeBack={() => takeBack(one.key)} />))}
            </Slips>
          ) : (
            <div className="pt-4"><Empty note="A bottle to load, a sensor to mount or an alarm appears here by itself.">Nothing at the rigs needs a hand.</Empty></div>
          )}
          <DoneToday zone={zone} now={now} />
        </div>
      </div>
    </>
  );
}

const isNobodys = ({ state, shelvedUntil }: AlarmAnswer) => state === "unacknowledged" && !shelvedUntil;

type Counts = { alarms: number; tasks: number; /** There are more tasks than these. */ more: boolean; unsent: number };

function sentenceOf({ alarms, tasks, more, unsent }: Counts): string {
  const parts = [
    alarms > 0 && `${inWords(alarms)} ${plural(alarms, "alarm")} that nobody has`,
    tasks > 0 && `${inWords(tasks)}${more ? " and more" : ""} ${plural(tasks, "task")}`,
    unsent > 0 && `${inWords(unsent)} ${plural(unsent, "answer")} not sent yet`,
  ].filter((part) => part !== false);
  return parts.length === 0 ? "Nothing needs a person." : `${capitalised(listOf(parts))}.`;
}
