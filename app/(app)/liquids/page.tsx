import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { liquidsOptions } from "@/lib/liquids/client";
import { findLiquids } from "@/lib/liquids/read";
import { currentPerson } from "@/lib/people/current-person";
import { LiquidsScreen } from "./liquids-screen";

export const metadata: Metadata = { title: "Liquids" };

export default async function LiquidsPage({ searchParams }: { searchParams: Promise<{ search?: string | string[] }> }) {
  const { role } = await currentPerson();
  const given = (await searchParams).search;
  const search = typeof given === "string" ? given.slice(0, 100) : "";
  const liquids = await findLiquids({ limit: 50, retired: "false", search });
  return (
    <Hydrated data={[[liquidsOptions(search).queryKey, { pages: [liquids], pageParams: [null] }]]}>
      <LiquidsScreen role={role} />
    </Hydrated>
  );
}
