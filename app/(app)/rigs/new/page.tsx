import type { Metadata } from "next";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { NewRigForm } from "./new-rig-form";

export const metadata: Metadata = { title: "New rig" };

export default async function NewRigPage() {
  const { role } = await currentPerson();
  const { timeZone } = await readLaboratory();
  return (
    <>
      <PageTitle crumbs={[{ label: "Rigs", href: "/rigs" }, { label: "New rig" }]}>New rig</PageTitle>
      <Section head="The rig" note="What its agent can do it says itself at the first contact.">
        {may(role, "edit rigs") ? <NewRigForm timeZone={timeZone} /> : <Empty>Making a rig needs {whoMay("edit rigs")}.</Empty>}
      </Section>
    </>
  );
}
