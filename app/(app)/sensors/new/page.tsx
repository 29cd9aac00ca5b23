import type { Metadata } from "next";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { NewSensorForm } from "./new-sensor-form";

export const metadata: Metadata = { title: "New sensor" };

export default async function NewSensorPage() {
  const { role } = await currentPerson();
  return (
    <>
      <PageTitle crumbs={[{ label: "Sensors", href: "/sensors" }, { label: "New sensor" }]}>New sensor</PageTitle>
      <Section head="The sensor" note="Nominal values in air are where the first search looks.">
        {may(role, "edit sensors") ? <NewSensorForm /> : <Empty>Recording a sensor needs {whoMay("edit sensors")}.</Empty>}
      </Section>
    </>
  );
}
