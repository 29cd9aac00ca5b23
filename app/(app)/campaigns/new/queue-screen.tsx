"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { HATCH } from "@/components/strip/tint";
import { Button } from "@/components/ui/button";
import { PageTitle, Section } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import { useLater } from "@/components/ui/use-later";
import { checkOptions, choicesOptions } from "@/lib/campaigns/draft-client";
import type { Choices } from "@/lib/campaigns/draft-schema";
import { BeforeQueueing, findingsOf } from "./before-queueing";
import { Cautions, type Acknowledged } from "./cautions";
import { Forecast } from "./forecast";
import { SlotsTable } from "./slots-table";
import { StartChoice } from "./start-choice";
import { useDraft, type Given } from "./use-draft";
import { useQueue } from "./use-queue";
import { WhatAndWhere } from "./what-and-where";

type QueueScreenProps = { personName: string; given: Given };

export function QueueScreen(props: QueueScreenProps) {
  const { data: choices, error, refetch } = useQuery(choicesOptions());
  if (!choices) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="rigs, sensors and protocols" height={320} />}</Section>;
  return <QueueForm {...props} choices={choices} />;
}

/** Forecast first, then what and where, then what must be fixed, then cautions. Nothing leaves this page before it is queued. */
function QueueForm({ choices, personName, given }: QueueScreenProps & { choices: Choices }) {
  const { draft, change, body } = useDraft(choices, given);
  const check = useQuery(checkOptions(useLater(body, 300)));
  const [acknowledged, setAcknowledged] = useState<Acknowledged>({});
  const queue = useQueue(given.draftId);

  const checked = body ? check.data : undefined;
  const findings = findingsOf({ draft, choices, checked, error: check.error, onChange: change });
  const open = checked?.cautions.filter(({ code, message }) => acknowledged[code]?.message !== message) ?? [];
  const notPossible = missing({ mustFix: findings.filter(({ kind }) => kind === "must").length, open: open.length, complete: checked !== undefined, fresh: !check.isPlaceholderData && !check.isFetching });
  const queueIt = () => body && checked && queue.queue({ draft: body, acknowledgements: checked.cautions.map(({ code }) => code) });
  const rig = choices.rigs.find(({ id }) => id === draft.rigId);

  return (
    <>
      <PageTitle
        crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: "Queue a campaign" }]}
        meta="One run of a protocol version with one sensor on one rig. Nothing leaves this page before it is queued."
        actions={
          <>
            <Button look="primary" busy={queue.isQueueing} notPossible={notPossible} onClick={queueIt}>Queue</Button>
            <Button look="link" busy={queue.isSaving} notPossible={body ? null : "protocol, sensor, rig and every slot come first"} onClick={() => body && queue.keep(body)}>Leave it a draft</Button>
          </>
        }
      >
        {draft.name.trim() || "New campaign"}
      </PageTitle>
      <Section
        head="Forecast"
        note={`What ${rig?.name ?? "the rig"} does over the next weeks with this campaign in it. Rings are where a person is needed.`}
        legend={
          <>
            <span><svg width="28" height="10" aria-hidden="true"><path d="M1 5H27M1 1v8M27 1v8" stroke="var(--ink2)" strokeWidth="1.25" /></svg>likely range</span>
            <span><svg width="26" height="14" aria-hidden="true"><rect width="26" height="14" fill={HATCH} /></svg>blocked</span>
            <span><svg width="14" height="12" aria-hidden="true"><circle cx="7" cy="6" r="4.5" fill="none" stroke="var(--ink)" strokeWidth="1.6" /></svg>person needed</span>
          </>
        }
      >
        <Forecast checked={checked} complete={body !== undefined} busy={check.isFetching} rig={rig} />
      </Section>
      <div className="grid grid-cols-[minmax(0,1fr)_372px] gap-x-10 narrow:grid-cols-1">
        <div>
          <Section head="What and where" note="Underlined words can be changed."><WhatAndWhere draft={draft} choices={choices} onChange={change} /></Section>
          <Section head="Liquids" note="Each slot of the protocol needs a port and a lot. The bar is needed of loaded.">
            <SlotsTable draft={draft} choices={choices} checked={checked} onChange={change} />
          </Section>
          <Section head="Start" note="In the rig's own time. A start may lie months ahead."><StartChoice draft={draft} rig={rig} onChange={change} /></Section>
        </div>
        <BeforeQueueing findings={findings} ready={checked !== undefined} />
      </div>
      <Section head="Cautions" note="Each takes a named person's word. It is kept with the name, the time and the words shown here.">
        <Cautions cautions={checked?.cautions} acknowledged={acknowledged} personName={personName} timeZone={rig?.timeZone ?? "UTC"} onAcknowledge={(caution) => setAcknowledged((before) => ({ ...before, [caution.code]: { message: caution.message, at: new Date().toISOString() } }))} />
        <div className="mt-4 flex flex-wrap items-center gap-4 border-t border-rule2 pt-4">
          <Button look="primary" busy={queue.isQueueing} notPossible={notPossible} onClick={queueIt}>Queue</Button>
          <span className="text-ink2">{notPossible ? `Not yet: ${notPossible}.` : `It goes in line on ${rig?.name ?? "its rig"}.`}</span>
        </div>
        {queue.error && <div className="mt-3"><Problem title={queue.error.message} error={queue.error} /></div>}
      </Section>
    </>
  );
}

function missing({ mustFix, open, complete, fresh }: { mustFix: number; open: number; complete: boolean; fresh: boolean }): string | null {
  const parts = [
    ...(mustFix > 0 ? [`${mustFix} to fix`] : []),
    ...(open > 0 ? [`${open} ${open === 1 ? "caution" : "cautions"} to acknowledge`] : []),
  ];
  if (parts.length > 0) return `${parts.join(" and ")} first`;
  return complete && fresh ? null : "it is being checked";
}
