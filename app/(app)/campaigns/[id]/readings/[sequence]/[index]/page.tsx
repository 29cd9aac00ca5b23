import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { campaignOptions, sweepOptions } from "@/lib/campaigns/client";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { getCampaign } from "@/lib/campaigns/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { readSweep } from "@/lib/readings/read-sweep";
import { sweepQuery } from "@/lib/readings/schema";
import { ReadingScreen } from "./reading-screen";

type Address = { params: Promise<{ id: string; sequence: string; index: string }> };

export async function generateMetadata({ params }: Address): Promise<Metadata> {
  const { id, index } = await params;
  const campaignId = campaignIdOf(id);
  return { title: campaignId && /^\d+$/.test(index) ? `Repeat ${Number(index) + 1}, ${campaignCode(campaignId)}` : "Repeat" };
}

export default async function ReadingPage({ params }: Address) {
  const { role } = await currentPerson();
  const { id, ...rest } = await params;
  const campaignId = campaignIdOf(id);
  const named = sweepQuery.required({ sequence: true, index: true }).safeParse(rest);
  if (!campaignId || !named.success || named.data.sequence === undefined || named.data.index === undefined) notFound();
  const { sequence, index } = named.data;
  const [campaign, sweep] = await Promise.all([orNotFound(getCampaign({ campaignId, now: new Date() })), orNotFound(readSweep({ campaignId, sequence, index }))]);
  return (
    <Hydrated
      data={[
        [campaignOptions(campaignId).queryKey, campaign],
        [sweepOptions(campaignId, { sequence, index }).queryKey, sweep],
      ]}
    >
      <ReadingScreen campaignId={campaignId} sequence={sequence} index={index} role={role} />
    </Hydrated>
  );
}
