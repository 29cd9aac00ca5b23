import type { Metadata } from "next";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { NewLiquidForm } from "./new-liquid-form";

export const metadata: Metadata = { title: "New liquid" };

export default async function NewLiquidPage() {
  const { role } = await currentPerson();
  return (
    <>
      <PageTitle crumbs={[{ label: "Liquids", href: "/liquids" }, { label: "New liquid" }]}>New liquid</PageTitle>
      {may(role, "edit liquids") ? <NewLiquidForm /> : <Section><Empty>Recording a liquid needs {whoMay("edit liquids")}.</Empty></Section>}
    </>
  );
}
