import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { idSchema } from "@/lib/http/ids";
import { importRunOptions } from "@/lib/imports/client";
import { getImport } from "@/lib/imports/read";
import { readLaboratory } from "@/lib/laboratory";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { ImportRunScreen } from "./import-run-screen";

export const metadata: Metadata = { title: "Import" };

export default async function ImportRunPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const [run, { timeZone }] = await Promise.all([orNotFound(getImport({ importRunId: id.data, now: new Date() })), readLaboratory()]);
  return (
    <Hydrated data={[[importRunOptions(run.id).queryKey, run]]}>
      <ImportRunScreen importRunId={run.id} role={role} zone={timeZone} />
    </Hydrated>
  );
}
