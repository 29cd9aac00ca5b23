import { route } from "@/lib/http/route";
import { findMounts } from "@/lib/mounts/read";
import { mountPage, mountQuery } from "@/lib/mounts/schema";

export const GET = route({
  permission: "read",
  summary: "Mounts, newest first",
  query: mountQuery,
  answer: mountPage,
  handle: ({ query }) => findMounts(query),
});
