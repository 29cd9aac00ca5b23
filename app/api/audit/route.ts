import { findAuditEvents } from "@/lib/audit/find";
import { route } from "@/lib/http/route";
import { auditPage, auditQuery } from "@/lib/people/schema";

export const GET = route({
  permission: "audit log",
  summary: "Who did what and when, newest first",
  query: auditQuery,
  answer: auditPage,
  handle: ({ person, query }) => findAuditEvents({ by: person, ...query }),
});
