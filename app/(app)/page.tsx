import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { stripsOptions } from "@/lib/campaigns/client";
import { readStrips } from "@/lib/campaigns/strip";
import { currentPerson } from "@/lib/people/current-person";
import { todayOptions } from "@/lib/today/client";
import { readToday } from "@/lib/today/read";
import { TodayScreen } from "./today/today-screen";

export const metadata: Metadata = { title: "Today" };

export default async function TodayPage() {
  const { role } = await currentPerson();
  const now = new Date();
  const today = await readToday({ now });
  const campaignIds = today.rigs.flatMap(({ campaign }) => campaign?.id ?? []);
  const strips = await readStrips({ campaignIds, now });
  return (
    <Hydrated
      data={[
        [todayOptions().queryKey, today],
        [stripsOptions(campaignIds, false).queryKey, strips],
      ]}
    >
      <TodayScreen role={role} />
    </Hydrated>
  );
}
