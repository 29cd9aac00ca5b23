import { notFound } from "@/lib/errors";
import { route } from "@/lib/http/route";

/** Whoever calls an address that is none gets a problem answer, not a page. */
const missing = route({
  permission: "public",
  summary: "No such address",
  handle() {
    throw notFound("address");
  },
});

export { missing as DELETE, missing as GET, missing as PATCH, missing as POST, missing as PUT };
