import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { idSchema } from "@/lib/http/ids";
import { getLot } from "@/lib/liquids/lots";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may, whoMay } from "@/lib/permissions";
import { EditLotForm } from "./edit-lot-form";

export const metadata: Metadata = { title: "Edit lot" };

export default async function EditLotPage({ params }: { params: Promise<{ id: string; lotId: string }> }) {
  const { role } = await currentPerson();
  const { id, lotId } = await params;
  const checked = idSchema.safeParse(lotId);
  if (!checked.success) notFound();
  const lot = await orNotFound(getLot(checked.data));
  if (lot.liquidId !== id) notFound();
  return (
    <>
      <PageTitle crumbs={[{ label: "Liquids", href: "/liquids" }, { label: lot.liquidName, href: `/liquids/${id}` }]}>Edit lot {lot.code} of {lot.liquidName}</PageTitle>
      <Section head="The lot" note="Its code stays. What stood before is in the audit log.">
        {may(role, "edit liquids") ? <EditLotForm lot={lot} /> : <Empty>Editing a lot needs {whoMay("edit liquids")}.</Empty>}
      </Section>
    </>
  );
}
