import { hash } from "node:crypto";
import type { ReadingInput } from "@/lib/readings/reading";

/** What makes two uploads of one index the same: every field and every number, bit for bit. */
export function contentHash({ takenAt, durationS, temperatureC, pressurePa, humidityPercent, record }: ReadingInput): Buffer {
  const head = Float64Array.of(
    takenAt.getTime(),
    durationS ?? NaN,
    temperatureC ?? NaN,
    pressurePa ?? NaN,
    humidityPercent ?? NaN,
    record.kind,
    record.startHz ?? NaN,
    record.stopHz ?? NaN,
    record.points,
  );
  const bytes = Buffer.concat([new Uint8Array(head.buffer), new Uint8Array(record.data.buffer, record.data.byteOffset, record.data.byteLength)]);
  return hash("sha256", bytes, "buffer").subarray(0, 16);
}
