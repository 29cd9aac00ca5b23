import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { alarmOptions } from "@/lib/alarms/client";
import { getAlarm } from "@/lib/alarms/read";
import { idSchema } from "@/lib/http/ids";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { AlarmScreen } from "./alarm-screen";

export const metadata: Metadata = { title: "Alarm" };

export default async function AlarmPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const now = new Date();
  const alarm = await orNotFound(getAlarm({ alarmId: id.data, now }));
  return (
    <Hydrated data={[[alarmOptions(id.data).queryKey, alarm]]}>
      <AlarmScreen alarmId={id.data} role={role} asOf={now.toISOString()} />
    </Hydrated>
  );
}
