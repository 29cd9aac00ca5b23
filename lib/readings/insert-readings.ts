import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";
import { CHANNEL } from "@/lib/notify";
import type { ReadingInput } from "@/lib/readings/reading";

type Insert = {
  stepId: string;
  readings: readonly ReadingInput[];
  times: readonly Date[];
  flags: readonly number[];
  hashes: readonly Buffer[];
  /** The lease under which they came is the present one: it counts anew until then. */
  leaseExpiresAt?: Date;
  now: Date;
};

/**
 * Readings and sweeps, their number at the step and the word to whoever fits them in one statement; all sweeps travel as one binary value that
 * the server cuts, and times as milliseconds. Returns the indices that are new.
 */
export async function insertReadings(transaction: Transaction, { stepId, readings, times, flags, hashes, leaseExpiresAt, now }: Insert): Promise<Set<number>> {
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
       select * from unnest($2::int[], $3::float8[], $4::float8[], $5::float8[], $6::float8[], $7::float8[], $8::float8[], $9::smallint[],
                            $10::smallint[], $11::int[], $12::float8[], $13::float8[], $14::int[], $15::int[], $16::int[])
         as t (idx, taken_ms, at_ms, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, ordinal, start_hz, stop_hz, points, byte_from, byte_length)),
     kept as (
       insert into reading (step_id, idx, taken_at, at, received_at, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, content_hash)
       select $1, idx, to_timestamp(taken_ms / 1000), to_timestamp(at_ms / 1000), $17, duration_s, temperature_c, pressure_pa, humidity_percent, kind, flags, substring($18::bytea from ordinal * 16 + 1 for 16)
         from input
       on conflict do nothing
       returning idx),
     cut as (
       insert into sweep (step_id, idx, start_hz, stop_hz, points, data)
       select $1, idx, start_hz, stop_hz, points, substring($19::bytea from byte_from for byte_length)
         from input join kept using (idx)),
     counted as (
       update step set stored = stored + (select count(*) from kept), lease_expires_at = coalesce($20, lease_expires_at) where id = $1),
     told as (
       select pg_notify($21, 'fit:' || $1::text || ':' || min(kept.idx)), pg_notify($21, 'changed:campaign:' || min(step.campaign_id))
         from kept join step on step.id = $1 having count(*) > 0)
     select idx, (select count(*) from told) from kept`,
    [
      stepId,
      column(({ index }) => index),
      column(({ takenAt }) => takenAt.getTime()),
      times.map((time) => time.getTime()),
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
      leaseExpiresAt ?? null,
      CHANNEL,
    ],
    transaction,
  );
  return new Set(inserted.map(({ idx }) => idx));
}
