import { once } from "node:events";
import { finished } from "node:stream/promises";
import pg from "pg";
import { from as copyFrom } from "pg-copy-streams";
import type { Transaction } from "sequelize";

/** Header of PostgreSQL's binary COPY: signature, flags, length of the extension. */
const HEADER = Buffer.from("PGCOPY\n\xff\r\n\0\0\0\0\0\0\0\0\0", "latin1");
const SINCE_2000_MS = Date.UTC(2000, 0, 1);
const PIECE = 1 << 20;

/** Rows in PostgreSQL's binary COPY format, field by field in the order of the columns. */
export class BinaryRows {
  private bytes = Buffer.allocUnsafe(PIECE);
  private at = 0;

  constructor() {
    this.clear();
  }

  /** Begins anew in the same memory. */
  clear(): void {
    HEADER.copy(this.bytes, 0);
    this.at = HEADER.length;
  }

  get length(): number {
    return this.at;
  }

  row(fields: number): this {
    this.room(2);
    this.at = this.bytes.writeInt16BE(fields, this.at);
    return this;
  }

  smallint(value: number): this {
    this.field(2);
    this.at = this.bytes.writeInt16BE(value, this.at);
    return this;
  }

  integer(value: number): this {
    this.field(4);
    this.at = this.bytes.writeInt32BE(value, this.at);
    return this;
  }

  /** A whole number of at most 2⁵³. */
  bigint(value: number): this {
    this.field(8);
    this.at = this.bytes.writeInt32BE(Math.floor(value / 2 ** 32), this.at);
    this.at = this.bytes.writeUInt32BE(value - Math.floor(value / 2 ** 32) * 2 ** 32, this.at);
    return this;
  }

  /** NaN and infinities are null. */
  double(value: number): this {
    if (!Number.isFinite(value)) return this.absent();
    this.field(8);
    this.at = this.bytes.writeDoubleBE(value, this.at);
    return this;
  }

  /** Whole ms since 1970. */
  instant(ms: number): this {
    return this.bigint((ms - SINCE_2000_MS) * 1000);
  }

  blob(value: Uint8Array): this {
    this.field(value.length);
    this.bytes.set(value, this.at);
    this.at += value.length;
    return this;
  }

  absent(): this {
    this.room(4);
    this.at = this.bytes.writeInt32BE(-1, this.at);
    return this;
  }

  /** Everything so far with the end mark. */
  end(): Buffer {
    this.room(2);
    this.at = this.bytes.writeInt16BE(-1, this.at);
    return this.bytes.subarray(0, this.at);
  }

  private field(length: number): void {
    this.room(4 + length);
    this.at = this.bytes.writeInt32BE(length, this.at);
  }

  private room(more: number): void {
    if (this.at + more <= this.bytes.length) return;
    const grown = Buffer.allocUnsafe(Math.max(2 * this.bytes.length, this.at + more));
    this.bytes.copy(grown, 0, 0, this.at);
    this.bytes = grown;
  }
}

/** Copies rows into a table within the transaction. @param columns Column names, written by us. */
export async function copyRows(transaction: Transaction, table: string, columns: string, rows: BinaryRows): Promise<void> {
  const { connection } = transaction as Transaction & { connection?: unknown };
  if (!(connection instanceof pg.Client)) throw new TypeError("the transaction has no connection of its own");
  const stream = connection.query(copyFrom(`copy ${table} (${columns}) from stdin (format binary)`));
  const done = finished(stream, { readable: false });
  const bytes = rows.end();
  for (let from = 0; from < bytes.length; from += PIECE) {
    if (!stream.write(bytes.subarray(from, from + PIECE))) await Promise.race([once(stream, "drain"), done]);
  }
  stream.end();
  await done;
}
