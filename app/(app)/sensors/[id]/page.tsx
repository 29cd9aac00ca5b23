import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { idSchema } from "@/lib/http/ids";
import { readLaboratory } from "@/lib/laboratory";
import { findMounts } from "@/lib/mounts/read";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { mountsOptions, sensorOptions } from "@/lib/sensors/client";
import { getSensor } from "@/lib/sensors/read";
import { SensorScreen } from "./sensor-screen";

export const metadata: Metadata = { title: "Sensor" };

export default async function SensorPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const sensorId = id.data;
  const sensor = await orNotFound(getSensor(sensorId));
  const [mounts, { timeZone }] = await Promise.all([findMounts({ sensorId, limit: 100 }), readLaboratory()]);
  return (
    <Hydrated
      data={[
        [sensorOptions(sensorId).queryKey, sensor],
        [mountsOptions(sensorId).queryKey, mounts],
      ]}
    >
      <SensorScreen sensorId={sensorId} role={role} zone={timeZone} now={new Date().toISOString()} />
    </Hydrated>
  );
}
