import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";
import type { ReadingInput } from "@/lib/readings/reading";

type Insert = {
  stepId: string;
  readings: readonly ReadingInput[];
  times: readonly Date[];
  flags: readonly number[];
  hashes: readonly Buffer[];
  now: Date;
};

/** Readings and sweeps in one statement; all sweeps travel as one binary value that the server cuts. */
export async function insertReadings(transaction: Transaction, { stepId, readings, times, flags, hashes, now }: Insert): Promise<Set<number>> {
  const column = <T>(pick: (reading: ReadingInput) => T) => readings.map(pick);
  const bytes = column(({ record }) => new Uint8Array(record.data.buffer, record.data.byteOffset, record.data.byteLength));
  const offsets: number[] = [];
  let end = 0;
  for (const { byteLength } of bytes) {
    offsets.push(end + 1);
    end += byteLength;
  }
  const inserted = await rows<{ idx: number }>(
    `with input as (
       select * from unnest($2::int[], $3::timestamptz[], $4::timestamptz[], $5::float8[], $6::float8[], $7::float8[], $8::float8[], $9::smallint[],
                            $10::smallint[], $11::int[], $12::float8[], $13::float8[], $14::int[], $15::int[], $16::int[])
         as t (idx, taken_at, at, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, ordinal, start_hz, stop_hz, points, byte_from, byte_length)),
     kept as (
       insert into reading (step_id, idx, taken_at, at, received_at, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, content_hash)
       select $1, idx, taken_at, at, $17, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, substring($18::bytea from ordinal * 16 + 1 for 16)
         from input
       on conflict do nothing
       returning idx)
     insert into sweep (step_id, idx, start_hz, stop_hz, points, data)
     select $1, idx, start_hz, stop_hz, points, substring($19::bytea from byte_from for byte_length)
       from input join kept using (idx)
     returning idx`,
    [
      stepId,
      column(({ index }) => index),
      column(({ takenAt }) => takenAt),
      times,
      column(({ durationS }) => durationS ?? null),
      column(({ temperatureC }) => temperatureC ?? null),
      column(({ pressurePa }) => pressurePa ?? null),
      column(({ humidityPercent }) => humidityPercent ?? null),
      column(({ record }) => record.kind),
      flags,
      readings.map((_, i) => i),
      column(({ record }) => record.startHz ?? null),
      column(({ record }) => record.stopHz ?? null),
      column(({ record }) => record.points),
      offsets,
      bytes.map(({ byteLength }) => byteLength),
      now,
      Buffer.concat(hashes),
      Buffer.concat(bytes),
    ],
    transaction,
  );
  return new Set(inserted.map(({ idx }) => idx));
}
