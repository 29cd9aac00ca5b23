import type { Metadata } from "next";
import { z } from "zod";
import { Hydrated } from "@/components/hydrated";
import { alarmOptions, openAlarmsOptions, pastAlarmsOptions } from "@/lib/alarms/client";
import { findAlarms, getAlarm } from "@/lib/alarms/read";
import { idSchema } from "@/lib/http/ids";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { findRigs } from "@/lib/rigs/read";
import { AlarmsScreen } from "./alarms-screen";

export const metadata: Metadata = { title: "Alarms" };

/** So many stand on the first screen; the others' plots follow. */
const FIRST_DRAWN = 6;

type Search = Promise<Record<string, string | string[] | undefined>>;

const addressFilter = z.object({ rig: idSchema.optional().catch(undefined), kind: z.string().max(60).optional().catch(undefined) });

export default async function AlarmsPage({ searchParams }: { searchParams: Search }) {
  const { role } = await currentPerson();
  const { rig: rigId, kind } = addressFilter.parse(await searchParams);
  const now = new Date();
  const [laboratory, open, past, rigs] = await Promise.all([
    readLaboratory(),
    findAlarms({ query: { state: "open", limit: 200 }, now }),
    findAlarms({ query: { state: "past", limit: 50, rigId, kind }, now }),
    findRigs({ limit: 200, retired: "false" }),
  ]);
  const drawn = open.items.filter(({ phaseId }) => phaseId !== undefined).slice(0, FIRST_DRAWN);
  const details = await Promise.all(drawn.map(({ id }) => getAlarm({ alarmId: id, now })));
  return (
    <Hydrated
      data={[
        ...details.map((alarm) => [alarmOptions(alarm.id).queryKey, alarm] as const),
        [openAlarmsOptions().queryKey, open],
        [pastAlarmsOptions({ rigId, kind }).queryKey, { pages: [past], pageParams: [null] }],
      ]}
    >
      <AlarmsScreen role={role} zone={laboratory.timeZone} asOf={now.toISOString()} filter={{ rigId, kind }} rigs={rigs.items.map(({ id, name }) => ({ id, name }))} />
    </Hydrated>
  );
}
