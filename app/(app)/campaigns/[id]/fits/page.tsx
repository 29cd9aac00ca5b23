import type { Metadata } from "next";
import { notFound, permanentRedirect } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { campaignOptions } from "@/lib/campaigns/client";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { getCampaign } from "@/lib/campaigns/read";
import { fitRunsOptions } from "@/lib/fit-runs/client";
import { findFitRuns } from "@/lib/fit-runs/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { FitsScreen } from "./fits-screen";

type Address = { params: Promise<{ id: string }> };

export async function generateMetadata({ params }: Address): Promise<Metadata> {
  const campaignId = campaignIdOf((await params).id);
  return { title: campaignId ? `Fits of ${campaignCode(campaignId)}` : "Fits" };
}

export default async function FitsPage({ params }: Address) {
  const { role } = await currentPerson();
  const part = (await params).id;
  const campaignId = campaignIdOf(part);
  if (!campaignId) notFound();
  if (part !== campaignCode(campaignId)) permanentRedirect(`/campaigns/${campaignCode(campaignId)}/fits`);
  const [campaign, runs] = await Promise.all([orNotFound(getCampaign({ campaignId, now: new Date() })), orNotFound(findFitRuns({ campaignId }))]);
  return (
    <Hydrated
      data={[
        [campaignOptions(campaignId).queryKey, campaign],
        [fitRunsOptions(campaignId).queryKey, runs],
      ]}
    >
      <FitsScreen campaignId={campaignId} role={role} />
    </Hydrated>
  );
}
