import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { findChoices } from "@/lib/campaigns/choices";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { begunNew, estimateOfDraft } from "@/lib/protocols/begun";
import { estimateOptions } from "@/lib/protocols/client";
import { PROTOCOL_EXAMPLES } from "@/lib/protocols/examples";
import { EditorScreen } from "../editor/editor-screen";
import { Beginnings } from "./beginnings";

export const metadata: Metadata = { title: "New protocol" };

export default async function NewProtocolPage({ searchParams }: { searchParams: Promise<{ from?: string | string[] }> }) {
  const person = await currentPerson();
  const crumbs = [{ label: "Protocols", href: "/protocols" }, { label: "New protocol" }];
  if (!may(person.role, "edit protocols"))
    return (
      <>
        <PageTitle crumbs={crumbs}>New protocol</PageTitle>
        <Section><Empty>Writing a protocol needs {whoMay("edit protocols")}.</Empty></Section>
      </>
    );
  const { from } = await searchParams;
  const example = PROTOCOL_EXAMPLES.find(({ id }) => id === from)?.definition;
  if (!example && from !== "nothing")
    return (
      <>
        <PageTitle crumbs={crumbs} meta="An example is a copy of your own: every value in it can be changed.">New protocol</PageTitle>
        <Section head="Begin from" note="Takes and waste are reckoned for a wire of 2 kHz on a rig like most."><Beginnings now={new Date()} zone={(await readLaboratory()).timeZone} /></Section>
      </>
    );
  const begun = begunNew(example ?? { name: "", readout: "velocity", blocks: [], limits: [] });
  const [choices, { timeZone }, begins] = await Promise.all([findChoices(), readLaboratory(), estimateOfDraft({ by: person, now: new Date(), draft: begun.draft })]);
  return (
    <Hydrated
      data={[
        [choicesOptions().queryKey, choices],
        ...(begins ? [[estimateOptions({ definition: begins.definition, rigId: "", sensorId: "" }).queryKey, begins.estimate] as const] : []),
      ]}
    >
      <EditorScreen key={String(from)} {...begun} zone={timeZone} />
    </Hydrated>
  );
}
