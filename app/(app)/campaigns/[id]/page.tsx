import type { Metadata } from "next";
import { notFound, permanentRedirect } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { campaignOptions, eventsOptions, notesOptions, stripOptions } from "@/lib/campaigns/client";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { findEvents } from "@/lib/campaigns/events";
import { findNotes } from "@/lib/campaigns/notes";
import { getCampaign } from "@/lib/campaigns/read";
import { readStrip } from "@/lib/campaigns/strip";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { CampaignScreen } from "./campaign-screen";

type Address = { params: Promise<{ id: string }> };

export async function generateMetadata({ params }: Address): Promise<Metadata> {
  const campaignId = campaignIdOf((await params).id);
  return { title: campaignId ? campaignCode(campaignId) : "Campaign" };
}

export default async function CampaignPage({ params }: Address) {
  const { role } = await currentPerson();
  const part = (await params).id;
  const campaignId = campaignIdOf(part);
  if (!campaignId) notFound();
  if (part !== campaignCode(campaignId)) permanentRedirect(`/campaigns/${campaignCode(campaignId)}`);
  const now = new Date();
  const campaign = await orNotFound(getCampaign({ campaignId, now }));
  const [strip, events, notes] = await Promise.all([
    readStrip({ campaignId, now }),
    findEvents({ campaignId, query: { limit: 50 } }),
    findNotes({ campaignId, query: { limit: 100 } }),
  ]);
  return (
    <Hydrated
      data={[
        [campaignOptions(campaignId).queryKey, campaign],
        [stripOptions(campaignId).queryKey, strip],
        [eventsOptions(campaignId, false).queryKey, { pages: [events], pageParams: [null] }],
        [notesOptions(campaignId).queryKey, notes],
      ]}
    >
      <CampaignScreen campaignId={campaignId} role={role} />
    </Hydrated>
  );
}
