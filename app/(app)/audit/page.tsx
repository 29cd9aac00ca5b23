import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { findAuditEvents } from "@/lib/audit/find";
import { readLaboratory } from "@/lib/laboratory";
import { auditOptions } from "@/lib/people/client";
import { currentPerson } from "@/lib/people/current-person";
import { findPeople } from "@/lib/people/find-people";
import { auditQuery } from "@/lib/people/schema";
import { may } from "@/lib/permissions";
import { NotAllowed } from "../not-allowed";
import { AuditScreen } from "./audit-screen";

export const metadata: Metadata = { title: "Audit log" };

type Search = Promise<Record<string, string | string[] | undefined>>;

const addressFilter = auditQuery.pick({ personId: true, entity: true, entityId: true, since: true }).catch({});

export default async function AuditPage({ searchParams }: { searchParams: Search }) {
  const by = await currentPerson();
  if (!may(by.role, "audit log")) return <NotAllowed permission="audit log" />;
  const filter = addressFilter.parse(await searchParams);
  const now = new Date();
  const [laboratory, events, people] = await Promise.all([
    readLaboratory(),
    findAuditEvents({ by, limit: 50, ...filter }),
    findPeople({ by, limit: 200, state: "all" }),
  ]);
  return (
    <Hydrated data={[[auditOptions(filter).queryKey, { pages: [events], pageParams: [null] }]]}>
      <AuditScreen filter={filter} people={people.items.map(({ id, name }) => ({ id, name }))} zone={laboratory.timeZone} now={now.toISOString()} />
    </Hydrated>
  );
}
