import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { protocolsOptions } from "@/lib/protocols/client";
import { findProtocols } from "@/lib/protocols/read";
import { protocolQuery } from "@/lib/protocols/schema";
import { ProtocolsScreen } from "./protocols-screen";

export const metadata: Metadata = { title: "Protocols" };

export default async function ProtocolsPage({ searchParams }: { searchParams: Promise<Record<string, string | string[] | undefined>> }) {
  const { role } = await currentPerson();
  const { sort, show, search } = await searchParams;
  const now = new Date();
  const query = {
    sort: protocolQuery.shape.sort.catch("-changed").parse(sort),
    show: protocolQuery.shape.show.catch("inUse").parse(show),
    search: typeof search === "string" ? search.slice(0, 100) : "",
  };
  const [protocols, { timeZone }] = await Promise.all([findProtocols({ ...query, limit: 50, now }), readLaboratory()]);
  return (
    <Hydrated data={[[protocolsOptions(query).queryKey, { pages: [protocols], pageParams: [null] }]]}>
      <ProtocolsScreen role={role} zone={timeZone} now={now.toISOString()} />
    </Hydrated>
  );
}
