import { changesQuery, followChanges } from "@/lib/http/changes";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Follow what others change, as server-sent events",
  query: changesQuery,
  produces: ["text/event-stream"],
  handle: ({ query, request }) => followChanges({ forS: query.forS, signal: request.signal }),
});
