"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { Fragment } from "react";
import { PageRow, PageTitle, Section, Vitals } from "@/components/ui/page";
import { StateMark } from "@/components/ui/state-mark";
import { Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatAgo, formatDayTime } from "@/lib/format-time";
import type { Role } from "@/lib/permissions";
import { BackToAir } from "./back-to-air";
import { CampaignVerbs } from "./campaign-verbs";
import { HoldsAndVersions } from "./holds-and-versions";
import { LatestSweep } from "./latest-sweep";
import { LiveWords } from "./live-words";
import { Log } from "./log";
import { Notes } from "./notes";
import { OpenHolds } from "./open-holds";
import { Repeats } from "./repeats";
import { Run } from "./run";
import { Stability } from "./stability";
import { useFollow } from "./use-follow";
import { useView } from "./use-view";
import { vitalsOf } from "./vitals";

export function CampaignScreen({ campaignId, role }: { campaignId: string; role: Role }) {
  const { data: campaign, error, refetch, dataUpdatedAt } = useQuery(campaignOptions(campaignId));
  useFollow(campaign);
  const { view, set, onWindow, onWhole } = useView();
  if (!campaign) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the campaign" height={320} />}</Section>;

  const measured = campaign.media.length > 0;
  const plots = { campaign, view, set };
  return (
    <>
      <PageTitle
        margin={<Margin campaign={campaign} asOf={dataUpdatedAt} />}
        crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: campaignCode(campaign.id) }]}
        meta={<Meta campaign={campaign} />}
        actions={<CampaignVerbs campaign={campaign} role={role} />}
      >
        {campaign.name}
      </PageTitle>
      <PageRow>
        {error && <div className="mt-4"><Problem title={`Shown as of ${formatDayTime(dataUpdatedAt, campaign.timeZone, dataUpdatedAt)}.`} error={error} onRetry={() => void refetch()} /></div>}
        <Vitals items={vitalsOf(campaign)} />
        <OpenHolds campaign={campaign} />
        <LiveWords campaign={campaign} />
      </PageRow>
      <Run campaign={campaign} window={view.window} onWindow={onWindow} onWhole={onWhole} />
      {measured && (
        <>
          <Repeats {...plots} onWindow={onWindow} onWhole={onWhole} companion={<Stability {...plots} />} />
          <Section head="Back to air" note="How far the air reference came back after each clean: its phase value against the baseline, and its course within the phase.">
            <div className="split">
              <BackToAir campaign={campaign} />
              <LatestSweep campaign={campaign} />
            </div>
          </Section>
        </>
      )}
      {(campaign.holds.length > 0 || campaign.amendments.length > 0) && <HoldsAndVersions campaign={campaign} />}
      <Section head="Log">
        <div className="split">
          <Log campaign={campaign} />
          <Notes campaign={campaign} role={role} />
        </div>
      </Section>
    </>
  );
}

function Margin({ campaign: { word, rigId, rig, lastContactAt, state, setAside }, asOf }: { campaign: CampaignAnswer; asOf: number }) {
  const onRig = state === "running" || state === "held";
  return (
    <>
      <StateMark state={word} />
      {rig && (
        <div>
          <Link href={`/rigs/${rigId}`}>{rig}</Link>
          {setAside ? ", set aside" : onRig && `, agent ${lastContactAt ? `seen ${formatAgo(lastContactAt, asOf)}` : "never seen"}`}
        </div>
      )}
    </>
  );
}

function Meta({ campaign }: { campaign: CampaignAnswer }) {
  const { protocol, protocolId, version, startedClock, startedAt, createdBy, sensor, sensorId, timeZone, now, slots, setPointsC, clock, origin } = campaign;
  const started = startedClock ?? startedAt;
  return (
    <>
      {protocol && <>Protocol <Link href={`/protocols/${protocolId}`}>{protocol}, version {version}</Link>. </>}
      {origin === "import" && "Imported. "}
      {started ? `Started ${formatDayTime(started, timeZone, now)}` : "Not started"}
      {createdBy && `, made by ${createdBy}`}.{" "}
      {sensor && <>Sensor <Link href={`/sensors/${sensorId}`}>{sensor}</Link></>}
      {setPointsC.length > 0 && `, cell at ${setPointsC.join(", ")}\u00a0°C`}
      {sensor && ". "}
      {slots.map(({ slot, liquid, liquidId, lot, port }, i) => (
        <Fragment key={slot}>{i > 0 && ", "}<Link href={`/liquids/${liquidId}`}>{liquid}</Link> {lot} on port {port}</Fragment>
      ))}
      {slots.length > 0 && ". "}
      {clock === "simulated" && "Times are of the rig’s simulated clock."}
    </>
  );
}
