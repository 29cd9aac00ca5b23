import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { idSchema } from "@/lib/http/ids";
import { getLiquid } from "@/lib/liquids/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { EditLiquidForm } from "./edit-liquid-form";

export const metadata: Metadata = { title: "Edit liquid" };

export default async function EditLiquidPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const liquid = await orNotFound(getLiquid(id.data));
  return (
    <>
      <PageTitle crumbs={[{ label: "Liquids", href: "/liquids" }, { label: liquid.name, href: `/liquids/${liquid.id}` }]}>Edit {liquid.name}</PageTitle>
      {may(role, "edit liquids") ? <EditLiquidForm liquid={liquid} /> : <Section><Empty>Editing a liquid needs {whoMay("edit liquids")}.</Empty></Section>}
    </>
  );
}
