import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { readLaboratory } from "@/lib/laboratory";
import { deadLettersOptions } from "@/lib/notifications/client";
import { findNotifications } from "@/lib/notifications/read";
import { currentPerson } from "@/lib/people/current-person";
import { may } from "@/lib/permissions";
import { NotAllowed } from "../../not-allowed";
import { DeadLetters } from "./dead-letters";

export const metadata: Metadata = { title: "Undelivered mail" };

export default async function MailPage() {
  const by = await currentPerson();
  if (!may(by.role, "settings")) return <NotAllowed permission="settings" />;
  const [laboratory, mails] = await Promise.all([readLaboratory(), findNotifications({ by, query: { state: "failed", limit: 50 } })]);
  return (
    <Hydrated data={[[deadLettersOptions().queryKey, { pages: [mails], pageParams: [null] }]]}>
      <DeadLetters zone={laboratory.timeZone} />
    </Hydrated>
  );
}
