"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { ReactNode } from "react";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { inWords, plural } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import type { Definition } from "@/lib/protocol/schema";
import { estimateOptions, protocolOptions, versionOptions } from "@/lib/protocols/client";
import type { ProtocolAnswer, VersionAnswer } from "@/lib/protocols/schema";
import { EstimatePanel, ProblemsPanel } from "../estimate-panel";
import { StepList } from "../step-list";
import { FactList, LimitList } from "./facts";
import { ProtocolVerbs } from "./protocol-verbs";
import { VersionsMargin } from "./versions-margin";

type ProtocolScreenProps = { protocolId: string; versionId: string | null; role: Role; zone: string; now: string };

/** A frozen version as a list of sentences, with what it takes. */
export function ProtocolScreen({ protocolId, versionId, role, zone, now }: ProtocolScreenProps) {
  const { data: protocol, error, refetch } = useQuery(protocolOptions(protocolId));
  if (!protocol) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the protocol" height={320} />}</Section>;
  const mayEdit = may(role, "edit protocols");
  const shown = protocol.versions.find(({ id }) => id === versionId);
  return (
    <>
      <PageTitle
        crumbs={[{ label: "Protocols", href: "/protocols" }, { label: protocol.name }]}
        meta={shown ? saved(shown, zone, now) : "No version has been saved yet."}
        actions={<ProtocolVerbs protocol={protocol} versionId={versionId} role={role} />}
      >
        {protocol.name}
        {protocol.retiredAt && <span className="text-ink2">, retired</span>}
      </PageTitle>
      {versionId ? (
        <Version protocol={protocol} versionId={versionId} zone={zone} margin={<VersionsMargin protocol={protocol} shownId={versionId} zone={zone} now={now} mayEdit={mayEdit} />} />
      ) : (
        <Section head="Steps"><Empty>There is only a draft of {protocol.name} so far{mayEdit ? "" : "; a researcher is writing it"}.</Empty></Section>
      )}
    </>
  );
}

function saved({ version, savedAt, savedBy, campaigns, note }: ProtocolAnswer["versions"][number], zone: string, now: string) {
  const ran = campaigns === 0 ? "No campaign has followed it yet" : `${inWords(campaigns)[0].toUpperCase()}${inWords(campaigns).slice(1)} ${plural(campaigns, "campaign")} followed it`;
  return <>Version {version}, saved {formatDayTime(savedAt, zone, now)}{savedBy && ` by ${savedBy}`}. {ran}; it stays as it is.{note && <><br />{note}</>}</>;
}

type VersionProps = { protocol: ProtocolAnswer; zone: string; margin: ReactNode };

function Version({ versionId, ...props }: VersionProps & { versionId: string }) {
  const { protocol } = props;
  const { data: version, error, refetch } = useQuery(versionOptions(protocol.id, versionId));
  if (!version) return <Section head="Steps">{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the version" height={320} />}</Section>;
  return <VersionBody {...props} version={version} />;
}

function VersionBody({ protocol, version, zone, margin }: VersionProps & { version: VersionAnswer }) {
  const { definition } = version;
  const estimate = useQuery(estimateOptions({ definition, rigId: "", sensorId: "" }));
  const others = protocol.versions.filter(({ id }) => id !== version.id);
  const before = others.find((other) => other.version < version.version) ?? others.at(-1);
  return (
    <>
      <Section head="Versions" controls={<>{margin}{before && <p className="mt-2"><Link href={`/protocols/${protocol.id}?version=${version.version}&with=${before.version}`}>Compare with version {before.version}</Link></p>}</>} label="Steps">
        <div className="protocol-body">
          <div>
            <div className="step-heads" aria-hidden="true"><span /><span>Step</span><span>Takes</span><span>Uses</span></div>
            <StepList label="Steps" blocks={definition.blocks} takes={estimate.data?.blocks ?? {}} />
            <EndBar />
          </div>
          <aside>
            {estimate.error && !estimate.data ? <Problem error={estimate.error} onRetry={() => void estimate.refetch()} /> : <EstimatePanel estimate={estimate.data} busy={estimate.isFetching} zone={zone} />}
            {estimate.data && <ProblemsPanel estimate={estimate.data} />}
          </aside>
        </div>
      </Section>
      <OtherSteps definition={definition} />
      <Section head="Limits" note="What Longreed watches, and what it does."><LimitList definition={definition} /></Section>
      <Section head="Besides"><FactList definition={definition} /></Section>
    </>
  );
}

function OtherSteps({ definition: { cleaning, park } }: { definition: Definition }) {
  return (
    <>
      {cleaning?.length ? <Section head="Clean again" note="Put in where a limit asks for it, with the reference after it."><StepList label="Clean again" blocks={cleaning} /></Section> : null}
      {park?.length ? <Section head="Park" note="Run when the campaign is stopped, or long held, and the cell is not empty."><StepList label="Park" blocks={park} /></Section> : null}
    </>
  );
}

/** The closing bar of the score. */
export function EndBar() {
  return (
    <div className="step last-bar">
      <svg width="18" height="18" aria-hidden="true" className="mt-px self-start"><path d="M6 1v16" stroke="var(--ink)" /><path d="M12 1v16" stroke="var(--ink)" strokeWidth="4" /></svg>
      <div className="words"><b>End</b>. The campaign is finished, and the rig is free.</div>
    </div>
  );
}
