import { formatInTimeZone } from "date-fns-tz";
import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { findChoices } from "@/lib/campaigns/choices";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { getCampaign } from "@/lib/campaigns/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { QueueScreen } from "./queue-screen";
import type { Given } from "./use-draft";

export const metadata: Metadata = { title: "Queue a campaign" };

type Search = Promise<Partial<Record<"version" | "sensor" | "rig" | "draft", string | string[]>>>;

export default async function NewCampaignPage({ searchParams }: { searchParams: Search }) {
  const person = await currentPerson();
  if (!may(person.role, "edit campaigns")) {
    return (
      <>
        <PageTitle crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: "Queue a campaign" }]}>Queue a campaign</PageTitle>
        <Section><Empty>Queueing a campaign needs {whoMay("edit campaigns")}.</Empty></Section>
      </>
    );
  }
  const { version, sensor, rig, draft } = await searchParams;
  const [choices, kept] = await Promise.all([findChoices(), typeof draft === "string" ? readKept(draft) : undefined]);
  const known = (id: string | string[] | undefined, list: readonly { id: string }[]) => (list.some((item) => item.id === id) ? String(id) : "");
  return (
    <Hydrated data={[[choicesOptions().queryKey, choices]]}>
      <QueueScreen
        personName={person.name}
        given={kept ?? { protocolVersionId: known(version, choices.versions), sensorId: known(sensor, choices.sensors), rigId: known(rig, choices.rigs) }}
      />
    </Hydrated>
  );
}

/** A draft that was left, to go on with; undefined when there is none under that number. */
async function readKept(draft: string): Promise<Given | undefined> {
  const campaignId = campaignIdOf(draft);
  if (!campaignId) notFound();
  const { id, state, name, priority, startAt, timeZone, protocolVersionId, sensorId, rigId, slots } = await orNotFound(getCampaign({ campaignId, now: new Date() }));
  if (state !== "draft") redirect(`/campaigns/${campaignCode(id)}`);
  return {
    draftId: id,
    protocolVersionId: protocolVersionId ?? "",
    sensorId: sensorId ?? "",
    rigId: rigId ?? "",
    slots: Object.fromEntries(slots.map(({ slot, port, lotId }) => [slot, { port, lotId }])),
    notBefore: startAt ? formatInTimeZone(startAt, timeZone, "yyyy-MM-dd'T'HH:mm") : "",
    priority: String(priority),
    name,
  };
}
