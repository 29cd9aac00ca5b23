import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { findChoices } from "@/lib/campaigns/choices";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { begunNew } from "@/lib/protocols/begun";
import { PROTOCOL_EXAMPLES } from "@/lib/protocols/examples";
import { EditorScreen } from "../editor/editor-screen";
import { Beginnings } from "./beginnings";

export const metadata: Metadata = { title: "New protocol" };

export default async function NewProtocolPage({ searchParams }: { searchParams: Promise<{ from?: string | string[] }> }) {
  const { role } = await currentPerson();
  const crumbs = [{ label: "Protocols", href: "/protocols" }, { label: "New protocol" }];
  if (!may(role, "edit protocols"))
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
  const [choices, { timeZone }] = await Promise.all([findChoices(), readLaboratory()]);
  return (
    <Hydrated data={[[choicesOptions().queryKey, choices]]}>
      <EditorScreen key={String(from)} {...begunNew(example ?? { name: "", readout: "velocity", blocks: [], limits: [] })} zone={timeZone} />
    </Hydrated>
  );
}
