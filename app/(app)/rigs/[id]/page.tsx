import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { Hydrated } from "@/components/hydrated";
import { idSchema } from "@/lib/http/ids";
import { orNotFound } from "@/lib/or-not-found";
import { currentPerson } from "@/lib/people/current-person";
import { may } from "@/lib/permissions";
import { blockedTimesOptions, contactsOptions, loadsOptions, rigOptions, tokensOptions } from "@/lib/rigs/client";
import { findBlockedTimes } from "@/lib/rigs/block-time";
import { findContacts } from "@/lib/rigs/contacts";
import { findLoads } from "@/lib/rigs/loads";
import { getRig } from "@/lib/rigs/read";
import { findAgentTokens } from "@/lib/rigs/tokens";
import { RigScreen } from "./rig-screen";

export const metadata: Metadata = { title: "Rig" };

export default async function RigPage({ params }: { params: Promise<{ id: string }> }) {
  const by = await currentPerson();
  const id = idSchema.safeParse((await params).id);
  if (!id.success) notFound();
  const rigId = id.data;
  const now = new Date();
  const rig = await orNotFound(getRig(rigId));
  const [contacts, loads, blocked, tokens] = await Promise.all([
    findContacts({ now }),
    findLoads({ rigId, limit: 20 }),
    findBlockedTimes({ rigId, now, limit: 50 }),
    may(by.role, "agent tokens") ? findAgentTokens({ by, rigId, limit: 200 }) : null,
  ]);
  return (
    <Hydrated
      data={[
        [rigOptions(rigId).queryKey, rig],
        [contactsOptions().queryKey, contacts],
        [loadsOptions(rigId).queryKey, loads],
        [blockedTimesOptions(rigId).queryKey, blocked],
        ...(tokens ? [[tokensOptions(rigId).queryKey, tokens] as const] : []),
      ]}
    >
      <RigScreen rigId={rigId} role={by.role} />
    </Hydrated>
  );
}
