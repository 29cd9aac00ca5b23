import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { idSchema } from "@/lib/http/ids";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { getSensor } from "@/lib/sensors/read";
import { EditSensorForm } from "./edit-sensor-form";

export const metadata: Metadata = { title: "Edit sensor" };

export default async function EditSensorPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const sensor = await orNotFound(getSensor(id.data));
  return (
    <>
      <PageTitle crumbs={[{ label: "Sensors", href: "/sensors" }, { label: sensor.serial, href: `/sensors/${sensor.id}` }]}>Edit {sensor.serial}</PageTitle>
      <Section head="The sensor" note="Serial number and kind are the sensor itself and stay. Each change goes into the audit log.">
        {may(role, "edit sensors") ? <EditSensorForm sensor={sensor} /> : <Empty>Editing a sensor needs {whoMay("edit sensors")}.</Empty>}
      </Section>
    </>
  );
}
