"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { LinkButton } from "@/components/ui/button";
import { Head, PageTitle, Section } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import { inWords, plural } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import type { Definition } from "@/lib/protocol/schema";
import { protocolOptions, versionOptions } from "@/lib/protocols/client";
import { changedFields, compareDefinitions } from "@/lib/protocols/compare";
import type { VersionAnswer } from "@/lib/protocols/schema";
import { StepList } from "../step-list";
import { FactList, LimitList } from "./facts";
import { VersionsMargin } from "./versions-margin";

type CompareScreenProps = { protocolId: string; /** The earlier first. */ versionIds: readonly [string, string]; role: Role; zone: string; now: string };

/** Two versions side by side; a bar at the right of a sentence says that the other version has it otherwise. */
export function CompareScreen({ protocolId, versionIds, role, zone, now }: CompareScreenProps) {
  const protocol = useQuery(protocolOptions(protocolId));
  const earlier = useQuery(versionOptions(protocolId, versionIds[0]));
  const later = useQuery(versionOptions(protocolId, versionIds[1]));
  const error = protocol.error ?? earlier.error ?? later.error;
  if (!protocol.data || !earlier.data || !later.data)
    return <Section>{error ? <Problem error={error} onRetry={() => void Promise.all([protocol.refetch(), earlier.refetch(), later.refetch()])} /> : <Loading label="two versions" height={320} />}</Section>;
  const [a, b] = [earlier.data, later.data];
  return (
    <>
      <PageTitle
        crumbs={[{ label: "Protocols", href: "/protocols" }, { label: protocol.data.name, href: `/protocols/${protocolId}` }, { label: `Versions ${a.version} and ${b.version}` }]}
        meta={b.note ?? undefined}
        actions={<LinkButton href={`/protocols/${protocolId}?version=${b.version}`}>Only version {b.version}</LinkButton>}
      >
        {protocol.data.name}, version {a.version} and {b.version}
      </PageTitle>
      <Section
        head="Compare"
        note="A bar marks what the other version has otherwise; changed values are underlined."
        controls={<VersionsMargin protocol={protocol.data} shownId={b.id} zone={zone} now={now} mayEdit={may(role, "edit protocols")} />}
      >
        <TwoVersions earlier={a} later={b} zone={zone} now={now} />
      </Section>
    </>
  );
}

function TwoVersions({ earlier, later, zone, now }: { earlier: VersionAnswer; later: VersionAnswer; zone: string; now: string }) {
  const [gone, come, changed] = useMemo(
    () => [
      compareDefinitions(earlier.definition, later.definition),
      compareDefinitions(later.definition, earlier.definition),
      changedFields(ownFields(earlier.definition), ownFields(later.definition)),
    ],
    [earlier, later],
  );
  const differing = new Set([...gone.keys(), ...come.keys()]).size + changed.size;
  return (
    <>
      <p className="say-small mb-4">{differing === 0 ? "The two say the same." : `${inWords(differing)[0].toUpperCase()}${inWords(differing).slice(1)} ${plural(differing, "place differs", "places differ")}.`}</p>
      <div className="compare">
        {[{ version: earlier, differences: gone }, { version: later, differences: come }].map(({ version, differences }) => (
          <div key={version.id} role="group" aria-label={`Version ${version.version}`}>
            <Head remark={`${formatDayTime(version.savedAt, zone, now)}${version.savedBy ? `, ${version.savedBy}` : ""}`}>Version {version.version}</Head>
            <StepList label={`Steps of version ${version.version}`} blocks={version.definition.blocks} differences={differences} />
            {(["cleaning", "park"] as const).map((list) => {
              const blocks = version.definition[list];
              return blocks?.length ? (
                <div key={list} className="mt-5"><Head>{list === "park" ? "Park" : "Clean again"}</Head><StepList label={list} blocks={blocks} differences={differences} /></div>
              ) : null;
            })}
            <div className="mt-5"><Head>Limits</Head><LimitList definition={version.definition} differences={differences} /></div>
            <div className="mt-5"><Head>Besides</Head><FactList definition={version.definition} changed={changed} /></div>
          </div>
        ))}
      </div>
    </>
  );
}

const ownFields = ({ readout, baseline, maxAttempts, parkAfterS, search }: Definition) => ({ readout, baseline, maxAttempts, parkAfterS, search });
