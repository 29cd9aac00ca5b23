import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { sensorsOptions } from "@/lib/sensors/client";
import { findSensors } from "@/lib/sensors/read";
import { SensorsScreen } from "./sensors-screen";

export const metadata: Metadata = { title: "Sensors" };

export default async function SensorsPage({ searchParams }: { searchParams: Promise<{ search?: string | string[] }> }) {
  const { role } = await currentPerson();
  const given = (await searchParams).search;
  const search = typeof given === "string" ? given.slice(0, 100) : "";
  const [sensors, { timeZone }] = await Promise.all([findSensors({ limit: 50, retired: "false", search }), readLaboratory()]);
  return (
    <Hydrated data={[[sensorsOptions(search).queryKey, { pages: [sensors], pageParams: [null] }]]}>
      <SensorsScreen role={role} zone={timeZone} />
    </Hydrated>
  );
}
