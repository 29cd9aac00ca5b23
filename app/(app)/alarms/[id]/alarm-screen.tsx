"use client";

import { useQuery } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { PageTitle, Section } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import { alarmOptions } from "@/lib/alarms/client";
import { stepsFor, titleOf } from "@/lib/alarms/words";
import { campaignCode } from "@/lib/campaigns/code";
import { capitalised } from "@/lib/format";
import { may, type Role } from "@/lib/permissions";
import { AlarmRow } from "../alarm-row";

/** Where the button of an alarm's mail leads. */
export function AlarmScreen({ alarmId, role, asOf }: { alarmId: string; role: Role; asOf: string }) {
  const { data: alarm, error, refetch, dataUpdatedAt } = useQuery(alarmOptions(alarmId));
  if (!alarm) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the alarm" height={240} />}</Section>;
  const now = new Date(Math.max(dataUpdatedAt, Date.parse(asOf))).toISOString();
  return (
    <>
      <PageTitle
        crumbs={[{ label: "Alarms", href: "/alarms" }, { label: alarm.rig }]}
        actions={alarm.campaignId && <LinkButton href={`/campaigns/${campaignCode(alarm.campaignId)}`}>Open {campaignCode(alarm.campaignId)}</LinkButton>}
      >
        {capitalised(titleOf(alarm))}
      </PageTitle>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      <div className="open-alarms"><AlarmRow alarm={alarm} now={now} may={may(role, "handle alarms")} alone /></div>
      {alarm.state !== "cleared" && (
        <Section head="What to do">
          <ol className="what-to-do">
            {stepsFor({ kind: alarm.kind, held: alarm.actionText?.includes("holds") ?? false }).map((step) => <li key={step}>{step}</li>)}
          </ol>
        </Section>
      )}
    </>
  );
}
