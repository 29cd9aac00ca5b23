import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { idSchema } from "@/lib/http/ids";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { getRig } from "@/lib/rigs/read";
import { EditRigForm } from "./edit-rig-form";

export const metadata: Metadata = { title: "Edit rig" };

export default async function EditRigPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const rig = await orNotFound(getRig(id.data));
  return (
    <>
      <PageTitle crumbs={[{ label: "Rigs", href: "/rigs" }, { label: rig.name, href: `/rigs/${rig.id}` }]}>Edit {rig.name}</PageTitle>
      <Section head="The rig" note="Its clock stays what it was: the times of all that it did depend on it. Each change goes into the audit log.">
        {may(role, "edit rigs") ? <EditRigForm rig={rig} /> : <Empty>Editing a rig needs {whoMay("edit rigs")}.</Empty>}
      </Section>
    </>
  );
}
