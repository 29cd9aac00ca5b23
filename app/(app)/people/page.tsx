import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { readLaboratory } from "@/lib/laboratory";
import { invitationsOptions, peopleOptions } from "@/lib/people/client";
import { currentPerson } from "@/lib/people/current-person";
import { findPeople } from "@/lib/people/find-people";
import { findInvitations } from "@/lib/people/invitations";
import { may } from "@/lib/permissions";
import { NotAllowed } from "../not-allowed";
import { PeopleScreen } from "./people-screen";

export const metadata: Metadata = { title: "People" };

export default async function PeoplePage() {
  const by = await currentPerson();
  if (!may(by.role, "people")) return <NotAllowed permission="people" />;
  const now = new Date();
  const [laboratory, people, invitations] = await Promise.all([
    readLaboratory(),
    findPeople({ by, limit: 200, state: "all" }),
    findInvitations({ by, now, limit: 50 }),
  ]);
  return (
    <Hydrated
      data={[
        [peopleOptions().queryKey, { pages: [people], pageParams: [null] }],
        [invitationsOptions().queryKey, { pages: [invitations], pageParams: [null] }],
      ]}
    >
      <PeopleScreen myId={by.id} laboratory={laboratory} now={now.toISOString()} />
    </Hydrated>
  );
}
