import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { findChoices } from "@/lib/campaigns/choices";
import { choicesOptions } from "@/lib/campaigns/draft-client";
import { idSchema } from "@/lib/http/ids";
import { readLaboratory } from "@/lib/laboratory";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { begunFrom, estimateOfDraft } from "@/lib/protocols/begun";
import { estimateOptions } from "@/lib/protocols/client";
import { EditorScreen } from "../../editor/editor-screen";

export const metadata: Metadata = { title: "Write a protocol" };

export default async function EditProtocolPage({ params }: { params: Promise<{ id: string }> }) {
  const person = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const [begun, { timeZone }] = await Promise.all([orNotFound(begunFrom(id.data)), readLaboratory()]);
  const { name, isRetired, ...draft } = begun;
  if (!may(person.role, "edit protocols") || isRetired)
    return (
      <>
        <PageTitle crumbs={[{ label: "Protocols", href: "/protocols" }, { label: name, href: `/protocols/${id.data}` }, { label: "Draft" }]}>{name}</PageTitle>
        <Section><Empty>{isRetired ? `${name} is retired; bring it back before you write its next version.` : `Writing a protocol needs ${whoMay("edit protocols")}.`}</Empty></Section>
      </>
    );
  const [choices, begins] = await Promise.all([findChoices(), estimateOfDraft({ by: person, now: new Date(), draft: draft.draft })]);
  return (
    <Hydrated
      data={[
        [choicesOptions().queryKey, choices],
        ...(begins ? [[estimateOptions({ definition: begins.definition, rigId: "", sensorId: "" }).queryKey, begins.estimate] as const] : []),
      ]}
    >
      <EditorScreen {...draft} zone={timeZone} />
    </Hydrated>
  );
}
