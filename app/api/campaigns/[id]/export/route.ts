import { exportCampaign } from "@/lib/export/export-campaign";
import { exportQuery } from "@/lib/export/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Readings, phases or results of a campaign as a file: spreadsheet, CSV or JSON, streamed",
  params: idParams,
  query: exportQuery,
  produces: ["application/vnd.openxmlformats-officedocument.spreadsheetml.sheet", "text/csv", "application/json"],
  handle: ({ params, query, now }) => exportCampaign({ campaignId: params.id, query, now }),
});
