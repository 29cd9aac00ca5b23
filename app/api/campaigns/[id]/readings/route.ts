import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { readingsQuery } from "@/lib/readings/schema";
import { streamReadings } from "@/lib/readings/stream";

export const GET = route({
  permission: "read",
  summary: "All readings of a campaign's phases, streamed as JSON or CSV, ordered by sequence and index",
  params: idParams,
  query: readingsQuery,
  produces: ["application/json", "text/csv"],
  handle: ({ params, query }) => streamReadings(params.id, query),
});
