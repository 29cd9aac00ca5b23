import { campaignCode } from "@/lib/campaigns/code";
import { aboutCampaign } from "@/lib/export/about";
import { phasesTable } from "@/lib/export/phases-table";
import { readingsTable } from "@/lib/export/readings-table";
import { resultsTable } from "@/lib/export/results-table";
import type { ExportQuery } from "@/lib/export/schema";
import type { About, Table } from "@/lib/export/table";
import { workbook } from "@/lib/export/workbook";
import { streamOf } from "@/lib/http/stream-of";
import { csvField } from "@/lib/readings/stream";

const TABLES = { readings: readingsTable, phases: phasesTable, results: resultsTable } as const;

const TYPES = {
  csv: "text/csv; charset=utf-8; header=present",
  json: "application/json",
  xlsx: "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet",
} as const;

/** Readings, phases or results of a campaign as a file, streamed. @throws AppError 404. */
export async function exportCampaign({ campaignId, query: { what, format, fitRunId }, now }: { campaignId: string; query: ExportQuery; now: Date }): Promise<Response> {
  const about = await aboutCampaign({ campaignId, fitRunId, now });
  const table = TABLES[what]({ campaignId, fitRunId });
  const pieces = format === "xlsx" ? workbook(table, about) : format === "csv" ? csv(table) : json(table, about);
  return new Response(streamOf(pieces), {
    headers: {
      "content-type": TYPES[format],
      "content-disposition": `attachment; filename="${campaignCode(campaignId)}-${what}.${format}"`,
      "cache-control": "no-store",
    },
  });
}

/** RFC 4180, UTF-8, LF, no comment lines; units are in the names. */
async function* csv({ columns, rows }: Table): AsyncGenerator<string> {
  yield `${columns.map(({ name }) => name).join(",")}\n`;
  for await (const batch of rows) yield batch.map((row) => `${row.map(csvField).join(",")}\n`).join("");
}

/** One document: what it is about, the columns with their units, and the items. */
async function* json({ columns, rows }: Table, about: About): AsyncGenerator<string> {
  yield `{"about":${JSON.stringify(Object.fromEntries(about))},"columns":${JSON.stringify(columns.map(({ name, unit, what }) => ({ name, unit, what })))},"items":[`;
  let separator = "";
  for await (const batch of rows) {
    if (batch.length === 0) continue;
    yield separator + batch.map((row) => JSON.stringify(Object.fromEntries(columns.map(({ name }, i) => [name, row[i]])))).join(",");
    separator = ",";
  }
  yield "]}\n";
}
