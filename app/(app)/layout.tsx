import type { ReactNode } from "react";
import { QueryProvider } from "@/components/query-provider";
import { Page } from "@/components/ui/page";
import { Toaster } from "@/components/ui/toaster";
import { env } from "@/lib/env";
import { currentPerson } from "@/lib/people/current-person";
import { getMe } from "@/lib/people/me";
import { may } from "@/lib/permissions";
import { FollowChanges } from "./follow-changes";
import { OfflineLine } from "./offline-line";
import { OutboxProvider } from "./outbox/outbox-provider";
import { TopOfPage } from "./top-of-page";

export default async function AppLayout({ children }: { children: ReactNode }) {
  const me = await getMe({ by: await currentPerson(), now: new Date() });
  return (
    <QueryProvider>
      <FollowChanges />
      <OutboxProvider personId={me.id}>
        <Page masthead={<TopOfPage me={me} demo={env().LONGREED_DEMO} />}>
          <OfflineLine zone={me.laboratory.timeZone} kept={may(me.role, "answer tasks")} />
          {children}
        </Page>
      </OutboxProvider>
      <Toaster />
    </QueryProvider>
  );
}
