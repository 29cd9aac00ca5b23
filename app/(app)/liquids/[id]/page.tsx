import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { idSchema } from "@/lib/http/ids";
import { readLaboratory } from "@/lib/laboratory";
import { liquidOptions, lotsOfLiquidOptions, usedInOptions } from "@/lib/liquids/client";
import { findLots } from "@/lib/liquids/lots";
import { getLiquid } from "@/lib/liquids/read";
import { findUsedIn } from "@/lib/liquids/used-in";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { LiquidScreen } from "./liquid-screen";

export const metadata: Metadata = { title: "Liquid" };

export default async function LiquidPage({ params }: { params: Promise<{ id: string }> }) {
  const { role } = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const liquidId = id.data;
  const liquid = await orNotFound(getLiquid(liquidId));
  const [lots, usedIn, { timeZone }] = await Promise.all([findLots({ liquidId, limit: 200 }), findUsedIn({ liquidId, limit: 20 }), readLaboratory()]);
  return (
    <Hydrated
      data={[
        [liquidOptions(liquidId).queryKey, liquid],
        [lotsOfLiquidOptions(liquidId).queryKey, lots],
        [usedInOptions(liquidId).queryKey, { pages: [usedIn], pageParams: [null] }],
      ]}
    >
      <LiquidScreen liquidId={liquidId} role={role} zone={timeZone} now={new Date().toISOString()} />
    </Hydrated>
  );
}
