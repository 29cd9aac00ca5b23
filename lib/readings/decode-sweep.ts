import { linearGrid, type Sweep } from "@/lib/numerics/resonance/types";
import { KIND } from "@/lib/readings/reading";

export type StoredSweep = { kind: number; startHz: number | null; stopHz: number | null; points: number; data: Buffer };

export type Decoded =
  | { form: "sweep"; sweep: Sweep }
  | { form: "ringDown"; sampleHz: number; startS: number; volts: Float64Array }
  | { form: "fitted"; f0Hz: number; q: number; f0StdHz?: number; qStd?: number; amplitudeV?: number };

/** A stored record as the numerics take it. */
export function decodeSweep({ kind, startHz, stopHz, points, data }: StoredSweep): Decoded {
  const values = toFloat64(data);
  if (kind === KIND.fitted) {
    const [f0Hz, q, f0StdHz, qStd, amplitudeV] = values;
    const given = (value: number) => (Number.isNaN(value) ? undefined : value);
    return { form: "fitted", f0Hz, q, f0StdHz: given(f0StdHz), qStd: given(qStd), amplitudeV: given(amplitudeV) };
  }
  if (kind === KIND.ringDown) return { form: "ringDown", sampleHz: startHz as number, startS: stopHz as number, volts: values };

  const even = startHz !== null && stopHz !== null;
  const frequencyHz = even ? linearGrid(startHz, stopHz, points) : values.subarray(0, points);
  const rest = even ? values : values.subarray(points);
  if (kind === KIND.magnitude) return { form: "sweep", sweep: { kind: "magnitude", frequencyHz, magnitude: rest } };
  return { form: "sweep", sweep: { kind: "complex", frequencyHz, re: rest.subarray(0, points), im: rest.subarray(points) } };
}

/** The driver's buffers may start anywhere in memory, so the bytes are copied to an aligned array. */
export function toFloat64(data: Buffer): Float64Array {
  const aligned = new Uint8Array(data.byteLength);
  aligned.set(data);
  return new Float64Array(aligned.buffer);
}
