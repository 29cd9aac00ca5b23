import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { currentPerson } from "@/lib/people/current-person";
import { todayOptions } from "@/lib/today/client";
import { readToday } from "@/lib/today/read";
import { TodayScreen } from "./today/today-screen";

export const metadata: Metadata = { title: "Today" };

export default async function TodayPage() {
  const { role } = await currentPerson();
  const today = await readToday({ now: new Date() });
  return (
    <Hydrated data={[[todayOptions().queryKey, today]]}>
      <TodayScreen role={role} />
    </Hydrated>
  );
}
