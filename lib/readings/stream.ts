import { findFitRun } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { flagNames } from "@/lib/numerics/resonance/flags";
import { streamOf } from "@/lib/http/stream-of";
import type { ReadingsQuery } from "@/lib/readings/schema";

type ReadingRow = {
  stepId: string;
  cycle: number;
  sequence: number;
  phaseId: string | null;
  index: number;
  takenAt: Date;
  medium: string;
  liquid: string | null;
  setPointC: number | null;
  temperatureC: number | null;
  pressurePa: number | null;
  humidityPercent: number | null;
  f0Hz: number | null;
  f0StdHz: number | null;
  q: number | null;
  qStd: number | null;
  amplitudeV: number | null;
  flags: number;
  excluded: boolean;
  fitRunId: string | null;
};

const BATCH = 2000;

export const COLUMNS = [
  "cycle", "sequence", "phaseId", "index", "takenAt", "medium", "liquid", "setPointC", "temperatureC", "pressurePa",
  "humidityPercent", "f0Hz", "f0StdHz", "q", "qStd", "amplitudeV", "flags", "excluded", "fitRunId",
] as const;

/** Readings in batches by key, ordered by (sequence, index): a million rows pass in constant memory. */
export async function* readingBatches(campaignId: string, query: Omit<ReadingsQuery, "format">, fitRun?: string): AsyncGenerator<ReadingRow[]> {
  const fitRunId = await findFitRun(campaignId, fitRun);
  let sequence = 0;
  let index = -1;
  for (;;) {
    const batch = await rows<ReadingRow>(
      `select s.id as "stepId", s.cycle, s.sequence, p.id as "phaseId", r.idx as index, r.at as "takenAt", s.medium, l.name as liquid,
              s.set_point_c as "setPointC", r.temperature_c as "temperatureC", r.pressure_pa as "pressurePa", r.humidity_percent as "humidityPercent",
              f.f0_hz as "f0Hz", f.f0_std_hz as "f0StdHz", f.q, f.q_std as "qStd", f.amplitude_v as "amplitudeV", coalesce(f.flags, r.flags) as flags,
              e.id is not null as excluded, f.fit_run_id as "fitRunId"
         from step s join reading r on r.step_id = s.id
         join phase p on p.step_id = s.id
         left join liquid l on l.id = p.liquid_id
         left join fit f on f.fit_run_id = $2 and f.step_id = r.step_id and f.idx = r.idx
         left join exclusion e on e.step_id = r.step_id and e.idx = r.idx and e.undone_at is null
        where s.campaign_id = $1 and s.kind = 'measure' and (s.sequence, r.idx) > ($3, $4)
          and ($5::text is null or s.medium = $5) and ($6::int is null or s.cycle = $6)
          and ($7::timestamptz is null or r.at >= $7) and ($8::timestamptz is null or r.at < $8)
        order by s.sequence, r.idx limit ${BATCH}`,
      [campaignId, fitRunId ?? null, sequence, index, query.medium ?? null, query.cycle ?? null, query.from ?? null, query.to ?? null],
    );
    if (batch.length > 0) yield batch;
    if (batch.length < BATCH) return;
    const last = batch[batch.length - 1];
    sequence = last.sequence;
    index = last.index;
  }
}

/** All readings of a campaign as RFC 4180 CSV (UTF-8, LF) or as one JSON document `{ items: [...] }`, streamed. */
export async function streamReadings(campaignId: string, query: ReadingsQuery): Promise<Response> {
  await findFitRun(campaignId);
  const isCsv = query.format === "csv";
  return new Response(streamOf(isCsv ? csv(campaignId, query) : json(campaignId, query)), {
    headers: {
      "content-type": isCsv ? "text/csv; charset=utf-8; header=present" : "application/json",
      "content-disposition": `attachment; filename="C-${campaignId}-readings.${isCsv ? "csv" : "json"}"`,
      "cache-control": "no-store",
    },
  });
}

async function* csv(campaignId: string, query: ReadingsQuery): AsyncGenerator<string> {
  yield `${COLUMNS.join(",")}\n`;
  for await (const batch of readingBatches(campaignId, query)) {
    yield batch.map(plainReading).map((reading) => `${COLUMNS.map((column) => csvField(reading[column])).join(",")}\n`).join("");
  }
}

async function* json(campaignId: string, query: ReadingsQuery): AsyncGenerator<string> {
  let separator = "";
  yield '{"items":[';
  for await (const batch of readingBatches(campaignId, query)) {
    yield separator + batch.map((reading) => JSON.stringify({ ...plainReading(reading), flags: flagNames(reading.flags) })).join(",");
    separator = ",";
  }
  yield "]}\n";
}

/** A reading as its columns carry it. */
export const plainReading = ({ stepId: _stepId, takenAt, flags, ...reading }: ReadingRow): Record<(typeof COLUMNS)[number], string | number | boolean | null> => ({
  ...reading,
  takenAt: takenAt.toISOString(),
  flags: flagNames(flags).join(";"),
});

/** Numbers as their shortest text that reads back the same; text quoted where RFC 4180 asks for it. A leading =, +, - or @ of a text is shielded, so that no spreadsheet runs it. */
export function csvField(value: string | number | boolean | null): string {
  if (value === null) return "";
  if (typeof value !== "string") return String(value);
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
