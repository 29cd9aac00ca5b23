import type { QueryKey } from "@tanstack/react-query";
import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { idSchema } from "@/lib/http/ids";
import { readLaboratory } from "@/lib/laboratory";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { estimateOptions, protocolOptions, versionOptions } from "@/lib/protocols/client";
import { estimateProtocol } from "@/lib/protocols/estimate";
import { getProtocol, getVersion } from "@/lib/protocols/read";
import { CompareScreen } from "./compare-screen";
import { ProtocolScreen } from "./protocol-screen";

export const metadata: Metadata = { title: "Protocol" };

type Props = { params: Promise<{ id: string }>; searchParams: Promise<{ version?: string | string[]; with?: string | string[] }> };

export default async function ProtocolPage({ params, searchParams }: Props) {
  const person = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const protocolId = id.data;
  const [protocol, { timeZone }, search] = await Promise.all([orNotFound(getProtocol(protocolId)), readLaboratory(), searchParams]);
  const now = new Date();
  const numbered = (given: string | string[] | undefined) => protocol.versions.find(({ version }) => String(version) === given);
  const shown = numbered(search.version) ?? protocol.versions.at(0);
  const other = numbered(search.with);
  const versions = await Promise.all([shown, other].flatMap((one) => (one ? [getVersion({ protocolId, versionId: one.id })] : [])));
  const about = { protocolId, role: person.role, zone: timeZone, now: now.toISOString() };
  const hydrated: (readonly [QueryKey, unknown])[] = [
    [protocolOptions(protocolId).queryKey, protocol],
    ...versions.map((version) => [versionOptions(protocolId, version.id).queryKey, version] as const),
  ];

  if (shown && other && other.id !== shown.id)
    return (
      <Hydrated data={hydrated}>
        <CompareScreen {...about} versionIds={[other, shown].toSorted((a, b) => a.version - b.version).map((one) => one.id) as [string, string]} />
      </Hydrated>
    );
  const definition = versions.at(0)?.definition;
  const estimate = definition && (await estimateProtocol({ by: person, now, definition }));
  return (
    <Hydrated data={[...hydrated, ...(definition ? [[estimateOptions({ definition, rigId: "", sensorId: "" }).queryKey, estimate] as const] : [])]}>
      <ProtocolScreen {...about} versionId={shown?.id ?? null} />
    </Hydrated>
  );
}
