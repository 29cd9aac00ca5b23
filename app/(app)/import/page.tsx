import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { importsOptions } from "@/lib/imports/client";
import { findImports } from "@/lib/imports/read";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { may } from "@/lib/permissions";
import { findSensors } from "@/lib/sensors/read";
import { NotAllowed } from "../not-allowed";
import { ImportScreen } from "./import-screen";

export const metadata: Metadata = { title: "Import" };

export default async function ImportPage() {
  const { role } = await currentPerson();
  if (!may(role, "edit campaigns")) return <NotAllowed permission="edit campaigns" />;
  const now = new Date();
  // Earlier data may well be of a sensor that is retired by now.
  const [imports, present, retired, { timeZone }] = await Promise.all([
    findImports({ query: { limit: 20 }, now }),
    findSensors({ limit: 200, retired: "false" }),
    findSensors({ limit: 200, retired: "true" }),
    readLaboratory(),
  ]);
  const sensors = [...present.items, ...retired.items].map(({ id, serial }) => ({ id, serial }));
  return (
    <Hydrated data={[[importsOptions().queryKey, imports]]}>
      <ImportScreen sensors={sensors} zone={timeZone} now={now.toISOString()} />
    </Hydrated>
  );
}
