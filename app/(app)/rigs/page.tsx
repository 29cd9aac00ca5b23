import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { currentPerson } from "@/lib/people/current-person";
import { contactsOptions, rigsOptions, timelineOptions } from "@/lib/rigs/client";
import { findContacts } from "@/lib/rigs/contacts";
import { findRigs } from "@/lib/rigs/read";
import { readTimeline } from "@/lib/rigs/timeline";
import { RigsScreen } from "./rigs-screen";

export const metadata: Metadata = { title: "Rigs" };

export default async function RigsPage() {
  const { role } = await currentPerson();
  const now = new Date();
  const [rigs, contacts, timeline] = await Promise.all([findRigs({ limit: 50, retired: "false" }), findContacts({ now }), readTimeline({ now })]);
  return (
    <Hydrated
      data={[
        [rigsOptions().queryKey, { pages: [rigs], pageParams: [null] }],
        [contactsOptions().queryKey, contacts],
        [timelineOptions().queryKey, timeline],
      ]}
    >
      <RigsScreen role={role} />
    </Hydrated>
  );
}
