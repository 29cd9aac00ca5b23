import { createHash } from "node:crypto";

/**
 * The repeats of one phase in compact columns, oldest first: a campaign's series is read from a few hundred of these
 * instead of tens of thousands of rows. Not yet fitted or not measured is NaN.
 */
export type PhaseColumns = {
  n: number;
  idx: Int32Array;
  /** Rig time, ms since 1970. */
  at: Float64Array;
  f0Hz: Float64Array;
  q: Float64Array;
  f0StdHz: Float64Array;
  temperatureC: Float64Array;
  /** Bits of FLAGS. */
  flags: Uint16Array;
  /** 1 where the reading does not enter the phase value: discarded, flagged so, or excluded by a person. */
  leftOut: Uint8Array;
};

const BYTES_EACH = 8 * 5 + 4 + 2 + 1;

/** For n repeats, all zero. */
export function emptyColumns(n: number): PhaseColumns {
  return columnsOn(new ArrayBuffer(n * BYTES_EACH), n);
}

/** Wide columns first, so that every view is aligned. */
function columnsOn(buffer: ArrayBuffer, n: number): PhaseColumns {
  return {
    n,
    at: new Float64Array(buffer, 0, n),
    f0Hz: new Float64Array(buffer, OFFSET.f0 * n, n),
    q: new Float64Array(buffer, OFFSET.q * n, n),
    f0StdHz: new Float64Array(buffer, 24 * n, n),
    temperatureC: new Float64Array(buffer, OFFSET.temperature * n, n),
    idx: new Int32Array(buffer, 40 * n, n),
    flags: new Uint16Array(buffer, 44 * n, n),
    leftOut: new Uint8Array(buffer, OFFSET.leftOut * n, n),
  };
}

/** Where each quantity begins in the bytes, in bytes a repeat. */
const OFFSET = { f0: 8, q: 16, temperature: 32, leftOut: 46 } as const;

/** One quantity of a phase's repeats, oldest first. */
export type RepeatsOf = Pick<PhaseColumns, "n" | "at" | "leftOut"> & { values: Float64Array };

const PART_BYTES_EACH = 8 + 8 + 1;

/** SQL for the bytes of one quantity out of `phase_summary.columns`: a third of the whole, which PostgreSQL cuts out without reading the rest. */
export const partSql = (quantity: "f0" | "q" | "temperature"): string => {
  const n = `(length(columns) / ${BYTES_EACH})`;
  const from = (offset: number, bytes: number) => `substring(columns from ${offset} * ${n} + 1 for ${bytes} * ${n})`;
  return `${from(0, 8)} || ${from(OFFSET[quantity], 8)} || ${from(OFFSET.leftOut, 1)}`;
};

/** SQL for index and flags of the repeats out of `phase_summary.columns`. */
export const marksSql = `substring(columns from 40 * (length(columns) / ${BYTES_EACH}) + 1 for 6 * (length(columns) / ${BYTES_EACH}))`;

/** @throws RangeError when the length is no whole number of repeats. */
export function decodeMarks(bytes: Buffer): Pick<PhaseColumns, "idx" | "flags"> {
  const n = bytes.byteLength / 6;
  if (!Number.isInteger(n)) throw new RangeError(`${bytes.byteLength} bytes are no whole number of repeats of 6 bytes`);
  const buffer = new ArrayBuffer(bytes.byteLength);
  new Uint8Array(buffer).set(bytes);
  return { idx: new Int32Array(buffer, 0, n), flags: new Uint16Array(buffer, 4 * n, n) };
}

/** @throws RangeError when the length is no whole number of repeats. */
export function decodePart(bytes: Buffer): RepeatsOf {
  const n = bytes.byteLength / PART_BYTES_EACH;
  if (!Number.isInteger(n)) throw new RangeError(`${bytes.byteLength} bytes are no whole number of repeats of ${PART_BYTES_EACH} bytes`);
  const buffer = new ArrayBuffer(bytes.byteLength);
  new Uint8Array(buffer).set(bytes);
  return { n, at: new Float64Array(buffer, 0, n), values: new Float64Array(buffer, 8 * n, n), leftOut: new Uint8Array(buffer, 16 * n, n) };
}

/** One repeat as the database has it. */
export type Repeat = {
  idx: number;
  at: Date;
  f0Hz: number | null;
  q: number | null;
  f0StdHz: number | null;
  temperatureC: number | null;
  flags: number;
};

/** Repeats by rising index as columns; `leftOut` is not marked yet. */
export function columnsOf(repeats: readonly Repeat[]): PhaseColumns {
  const columns = emptyColumns(repeats.length);
  repeats.forEach((repeat, i) => {
    columns.idx[i] = repeat.idx;
    columns.at[i] = repeat.at.getTime();
    columns.f0Hz[i] = repeat.f0Hz ?? NaN;
    columns.q[i] = repeat.q ?? NaN;
    columns.f0StdHz[i] = repeat.f0StdHz ?? NaN;
    columns.temperatureC[i] = repeat.temperatureC ?? NaN;
    columns.flags[i] = repeat.flags;
  });
  return columns;
}

/** Little-endian bytes for `phase_summary.columns`. */
export const encodeColumns = (columns: PhaseColumns): Buffer => Buffer.from(columns.at.buffer as ArrayBuffer);

/** Equal digests are equal repeats. */
export const digestOf = (columns: PhaseColumns): Buffer => createHash("sha256").update(encodeColumns(columns)).digest();

/** @throws RangeError when the length is no whole number of repeats. */
export function decodeColumns(bytes: Buffer): PhaseColumns {
  const n = bytes.byteLength / BYTES_EACH;
  if (!Number.isInteger(n)) throw new RangeError(`${bytes.byteLength} bytes are no whole number of repeats of ${BYTES_EACH} bytes`);
  const buffer = new ArrayBuffer(bytes.byteLength);
  new Uint8Array(buffer).set(bytes);
  return columnsOn(buffer, n);
}
