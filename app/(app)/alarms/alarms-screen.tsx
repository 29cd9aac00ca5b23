"use client";

import { useQuery } from "@tanstack/react-query";
import { PageSentence, Section } from "@/components/ui/page";
import { Empty, Loading, Offline, Problem } from "@/components/ui/states";
import { openAlarmsOptions, type AlarmFilter } from "@/lib/alarms/client";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { titleOf } from "@/lib/alarms/words";
import { capitalised, inWords, plural } from "@/lib/format";
import { formatTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { AlarmRow } from "./alarm-row";
import { PastAlarms } from "./past-alarms";
import { StateWords } from "./state-words";

type AlarmsScreenProps = { role: Role; zone: string; asOf: string; filter: AlarmFilter; rigs: readonly { id: string; name: string }[] };

/** Every open alarm with what, where, how far beyond and what Longreed did; under them the past ones. */
export function AlarmsScreen({ role, zone, asOf, filter, rigs }: AlarmsScreenProps) {
  const { data, error, refetch, dataUpdatedAt } = useQuery(openAlarmsOptions());
  if (!data) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the alarms" height={240} />}</Section>;

  const now = new Date(Math.max(dataUpdatedAt, Date.parse(asOf))).toISOString();
  const open = data.items.toSorted((a, b) => rank(a) - rank(b));
  const shelved = open.filter(({ shelvedUntil }) => shelvedUntil).length;
  return (
    <>
      <PageSentence margin={open.length > 0 && <><b className="text-ink">{open.length}{data.nextCursor && "+"} open</b>{shelved > 0 && `, ${inWords(shelved)} of them shelved`}</>}>{sentenceOf(open)}</PageSentence>
      {error && <div className="page-row"><div className="margin" /><Offline asOf={formatTime(now, zone)} onTryNow={() => void refetch()} /></div>}
      {open.length > 0 ? (
        <div className="open-alarms">{open.map((alarm) => <AlarmRow key={alarm.id} alarm={alarm} now={now} may={may(role, "handle alarms")} />)}</div>
      ) : (
        <Section label="Open alarms"><Empty note="A limit of a protocol, a failed step or a silent rig opens one, and those concerned get mail.">No alarm is open.</Empty></Section>
      )}
      <PastAlarms filter={filter} rigs={rigs} now={now} />
      <StateWords />
    </>
  );
}

const rank = ({ state, shelvedUntil }: AlarmAnswer): number => (shelvedUntil ? 3 : { unacknowledged: 0, acknowledged: 1, returned: 2, cleared: 3 }[state]);

function sentenceOf(open: readonly AlarmAnswer[]): string {
  const nobodyHas = open.filter(({ state, shelvedUntil }) => state === "unacknowledged" && !shelvedUntil);
  if (open.length === 0) return "No alarm is open.";
  const others = open.length - nobodyHas.length;
  if (nobodyHas.length === 0) return `${capitalised(inWords(others))} ${plural(others, "alarm is", "alarms are")} open, and ${plural(others, "it is", "all are")} being seen to.`;
  const [first] = nobodyHas;
  const rest = open.length - 1;
  const title = titleOf(first);
  const head = nobodyHas.length === 1 ? `${first.rig}${title.startsWith("could not") ? " " : ": "}${title}, and nobody has it yet.` : `${capitalised(inWords(nobodyHas.length))} alarms are open that nobody has.`;
  const left = nobodyHas.length === 1 ? rest : others;
  return left > 0 ? `${head} ${capitalised(inWords(left))} more ${plural(left, "is", "are")} open.` : head;
}
