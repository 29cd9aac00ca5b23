"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { PageRow, PageTitle, Section, Vitals } from "@/components/ui/page";
import { StateMark } from "@/components/ui/state-mark";
import { Loading, Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatNumber, NO_VALUE, plural } from "@/lib/format";
import { formatAgo, formatDayTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { rigOptions } from "@/lib/rigs/client";
import type { RigAnswer } from "@/lib/rigs/schema";
import { AgentsTable } from "../agents-table";
import { rigWord } from "../rig-word";
import { AgentTokens } from "./agent-tokens";
import { BlockedTimes } from "./blocked-times";
import { Ports } from "./ports";
import { RecentLoads } from "./recent-loads";
import { RigVerbs } from "./rig-verbs";

export function RigScreen({ rigId, role }: { rigId: string; role: Role }) {
  const { data: rig, error, refetch, dataUpdatedAt } = useQuery(rigOptions(rigId));
  if (!rig) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the rig" height={240} />}</Section>;

  const { campaign, mounts } = rig;
  return (
    <>
      <PageTitle
        crumbs={[{ label: "Rigs", href: "/rigs" }, { label: rig.name }]}
        meta={`${rig.timeZone}, ${rig.clock === "real" ? "real time" : "simulated clock"}${rig.retiredAt ? ", retired" : ""}`}
        actions={<RigVerbs rig={rig} role={role} />}
      >
        {rig.name}
      </PageTitle>
      <PageRow>
        {error && <Problem error={error} onRetry={() => void refetch()} />}
        <Vitals
          items={[
            { label: "State", value: campaign ? <StateMark state={rigWord(rig)} /> : "Free", note: campaign?.takenOver ? "taken over by hand" : undefined },
            { label: "Campaign", value: campaign ? <Link href={`/campaigns/${campaignCode(campaign.id)}`}>{campaign.name}</Link> : NO_VALUE, note: campaign?.cursorText ?? `${rig.queued} in line` },
            { label: "Cell", value: rig.temperatureC === null ? NO_VALUE : `${formatNumber(rig.temperatureC, { decimals: 2 })}\u00a0°C`, note: mountedText(mounts) },
            { label: "Agent seen", value: rig.lastContactAt ? formatAgo(rig.lastContactAt, dataUpdatedAt) : "never", note: simulatedTime(rig, dataUpdatedAt) },
          ]}
        />
      </PageRow>
      <Section head="Agent" note="Each line is ten minutes, its height the number of contacts.">
        <AgentsTable rigs={[rig]} asOf={dataUpdatedAt} />
        <Abilities rig={rig} />
      </Section>
      <Section id="bottles" head="Bottles" note="Level now; a top up takes the same lot only.">
        <Ports rig={rig} role={role} asOf={dataUpdatedAt} />
      </Section>
      <Section head="Loads" note="What was put on, newest first.">
        <RecentLoads rigId={rigId} timeZone={rig.timeZone} />
      </Section>
      <Section head="Blocked time" note="The rig is kept free for service.">
        <BlockedTimes rig={rig} role={role} />
      </Section>
      {may(role, "agent tokens") && (
        <Section head="Agent tokens" note="Of a token only the last four signs are kept readable. A new one is shown once.">
          <AgentTokens rig={rig} />
        </Section>
      )}
    </>
  );
}

const mountedText = (mounts: RigAnswer["mounts"]) =>
  mounts.length === 0 ? "nothing mounted" : mounts.map(({ serial, position }) => `${serial}${mounts.length > 1 ? `, position ${position}` : ""}`).join("; ");

const simulatedTime = ({ clock, reportedClock, timeZone }: RigAnswer, asOf: number) =>
  clock === "simulated" && reportedClock ? `its clock says ${formatDayTime(reportedClock, timeZone, asOf)}` : undefined;

function Abilities({ rig: { abilities, ports } }: { rig: RigAnswer }) {
  if (!abilities) return <p className="caption">The agent has not said yet what the rig can do; campaigns wait until it has.</p>;
  const { minHz, maxHz, maxPoints, maxDriveV, minTemperatureC, maxTemperatureC, kinds } = abilities;
  const temperatures = minTemperatureC !== undefined && maxTemperatureC !== undefined ? `, ${formatNumber(minTemperatureC)} to ${formatNumber(maxTemperatureC)} °C` : "";
  return (
    <p className="caption">
      Sweeps {formatNumber(minHz)} to {formatNumber(maxHz)} Hz with up to {formatNumber(maxPoints)} points and {formatNumber(maxDriveV)} V{temperatures}, {ports.length}{" "}
      {plural(ports.length, "port")}; it can {kinds.join(", ")}.
    </p>
  );
}
