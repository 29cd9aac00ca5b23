import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { findChoices } from "@/lib/campaigns/choices";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { QueueScreen } from "./queue-screen";

export const metadata: Metadata = { title: "Queue a campaign" };

type Search = Promise<{ version?: string | string[]; sensor?: string | string[]; rig?: string | string[] }>;

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
  const { version, sensor, rig } = await searchParams;
  const choices = await findChoices();
  const known = (id: string | string[] | undefined, list: readonly { id: string }[]) => (list.some((item) => item.id === id) ? String(id) : "");
  return (
    <Hydrated data={[[choicesOptions().queryKey, choices]]}>
      <QueueScreen
        personName={person.name}
        now={new Date().toISOString()}
        given={{ protocolVersionId: known(version, choices.versions), sensorId: known(sensor, choices.sensors), rigId: known(rig, choices.rigs) }}
      />
    </Hydrated>
  );
}
