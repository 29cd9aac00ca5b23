import { seriesAnswer, seriesQuery } from "@/lib/analysis/schema";
import { readSeries } from "@/lib/analysis/series";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Repeats in at most `points` buckets, for plots; never drops an extreme",
  params: idParams,
  query: seriesQuery,
  answer: seriesAnswer,
  handle: ({ params, query }) => readSeries(params.id, query),
});
