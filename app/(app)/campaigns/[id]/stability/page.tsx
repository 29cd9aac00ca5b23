import type { Metadata } from "next";
import { notFound, permanentRedirect } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { campaignOptions } from "@/lib/campaigns/client";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { getCampaign } from "@/lib/campaigns/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { AnalysisScreen } from "./analysis-screen";

type Address = { params: Promise<{ id: string }> };

export async function generateMetadata({ params }: Address): Promise<Metadata> {
  const campaignId = campaignIdOf((await params).id);
  return { title: campaignId ? `Analysis of ${campaignCode(campaignId)}` : "Analysis" };
}

export default async function AnalysisPage({ params }: Address) {
  await currentPerson();
  const part = (await params).id;
  const campaignId = campaignIdOf(part);
  if (!campaignId) notFound();
  if (part !== campaignCode(campaignId)) permanentRedirect(`/campaigns/${campaignCode(campaignId)}/stability`);
  const campaign = await orNotFound(getCampaign({ campaignId, now: new Date() }));
  return (
    <Hydrated data={[[campaignOptions(campaignId).queryKey, campaign]]}>
      <AnalysisScreen campaignId={campaignId} />
    </Hydrated>
  );
}
