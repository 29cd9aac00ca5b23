import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { overviewOptions } from "@/lib/campaigns/client";
import { readOverview } from "@/lib/campaigns/overview";
import { currentPerson } from "@/lib/people/current-person";
import { CampaignsScreen } from "./campaigns-screen";
import { readFilter } from "./list-filter";

export const metadata: Metadata = { title: "Campaigns" };

type Search = Promise<Record<string, string | string[] | undefined>>;

export default async function CampaignsPage({ searchParams }: { searchParams: Search }) {
  const { role } = await currentPerson();
  const given = Object.entries(await searchParams).flatMap(([name, value]) => (typeof value === "string" ? [[name, value]] : []));
  const filter = readFilter(Object.fromEntries(given));
  return (
    <Hydrated data={[[overviewOptions(filter).queryKey, await readOverview(filter)]]}>
      <CampaignsScreen role={role} />
    </Hydrated>
  );
}
