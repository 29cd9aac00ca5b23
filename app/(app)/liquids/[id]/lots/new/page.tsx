import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { idSchema } from "@/lib/http/ids";
import { getLiquid } from "@/lib/liquids/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { NewLotForm } from "./new-lot-form";

export const metadata: Metadata = { title: "New lot" };

export default async function NewLotPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const liquid = await orNotFound(getLiquid(id.data));
  return (
    <>
      <PageTitle crumbs={[{ label: "Liquids", href: "/liquids" }, { label: liquid.name, href: `/liquids/${liquid.id}` }]}>New lot of {liquid.name}</PageTitle>
      <Section head="The lot" note="One delivered bottle; its certificate is what the sensor is compared with.">
        {may(role, "edit liquids") ? <NewLotForm liquidId={liquid.id} /> : <Empty>Recording a lot needs {whoMay("edit liquids")}.</Empty>}
      </Section>
    </>
  );
}
